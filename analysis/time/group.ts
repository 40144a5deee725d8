import type { Analysis, GroupResult } from '../result.ts';
import { measureLadder } from './ladder.ts';
import { measureLag } from './lag.ts';

/** Kinds whose photographs only say what they have to say together. */
export const groupKinds = ['ladder', 'lag'] as const;
export type GroupKind = (typeof groupKinds)[number];

export function isGroupKind(kind: string): kind is GroupKind {
  return groupKinds.some((known) => known === kind);
}

/** What the analyses of one group give together. */
export function measureGroup(
  kind: GroupKind,
  shots: readonly { name: string; analysis: Analysis }[],
): GroupResult {
  if (kind === 'ladder') return measureLadder(shots.map(ladderShot));
  return measureLag(
    shots.flatMap(({ name, analysis }) => {
      const { timing } = analysis.plots;
      return timing ? [{ name, timing }] : [];
    }),
  );
}

function ladderShot({ name, analysis }: { name: string; analysis: Analysis }) {
  const find = (wanted: string) => analysis.metrics.find((m) => m.name === wanted);
  return {
    name,
    capture: analysis.capture,
    greys: analysis.plots.greys ?? null,
    median: find('exposure.median') ?? null,
    clippedHighlights: find('clip.highlights')?.value ?? 0,
  };
}
