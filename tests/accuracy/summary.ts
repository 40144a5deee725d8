import type { Row } from './rows.ts';
import type { SceneResult } from './run-scene.ts';
import type { Sample } from './samples.ts';

export interface Summary {
  readonly row: Row;
  readonly scenes: number;
  readonly count: number;
  readonly bias: number;
  readonly deviation: number;
  readonly median: number;
  readonly p95: number;
  readonly largest: number;
  /** Share of samples whose truth lies within ±2 u, or null where nothing states an uncertainty. */
  readonly within: number | null;
  /** What is short of the allowance, in words; empty is a pass. */
  readonly short: readonly string[];
}

/** Bounds on the share within ±2 u, from measurements.md. */
const coverage = { low: 0.9, high: 0.99 } as const;

/** @param judgeCoverage off for a handful of scenes, whose share says little */
export function summarise(
  row: Row,
  results: readonly SceneResult[],
  judgeCoverage: boolean,
): Summary {
  const mine = results.filter(({ suite }) => row.suites.includes(suite));
  const samples = mine.flatMap((r) => r.samples.filter((s) => s.quantity === row.quantity));
  const found = samples.filter(({ error }) => Number.isFinite(error));
  const sizes = samples.map(({ error }) => Math.abs(error)).sort((a, b) => a - b);
  const bias = mean(found.map(({ error }) => error));
  const deviation = Math.sqrt(mean(found.map(({ error }) => (error - bias) ** 2)));
  const [median, p95, largest] = [0.5, 0.95, 1].map((share) => quantile(sizes, share)) as [
    number,
    number,
    number,
  ];
  const within = shareWithin(samples);
  const short: string[] = [];
  if (samples.length === 0) short.push('nothing measured');
  for (const [name, value] of Object.entries({ median, p95, largest })) {
    const limit = row.allowed[name as keyof Row['allowed']];
    if (limit !== undefined && !(value <= limit))
      short.push(`${name} ${value.toPrecision(3)} > ${limit}`);
  }
  if (
    row.stated &&
    judgeCoverage &&
    !(within !== null && within >= coverage.low && within <= coverage.high)
  )
    short.push(`within 2 u ${percent(within)}, not 90–99 %`);
  const scenes = mine.length;
  return {
    row,
    scenes,
    count: samples.length,
    bias,
    deviation,
    median,
    p95,
    largest,
    within,
    short,
  };
}

function mean(values: readonly number[]): number {
  return values.length ? values.reduce((sum, value) => sum + value, 0) / values.length : Number.NaN;
}

/** Nearest rank: the smallest value that this share of all doesn't exceed. */
function quantile(sorted: readonly number[], share: number): number {
  return sorted[Math.max(0, Math.ceil(share * sorted.length) - 1)] ?? Number.NaN;
}

function shareWithin(samples: readonly Sample[]): number | null {
  const stated = samples.filter(({ uncertainty }) => uncertainty !== null);
  if (stated.length === 0) return null;
  const inside = stated.filter(({ error, uncertainty }) => Math.abs(error) <= 2 * uncertainty!);
  return inside.length / stated.length;
}

function percent(share: number | null): string {
  return share === null ? '–' : `${(100 * share).toFixed(1)} %`;
}

export const heading = [
  'quantity'.padEnd(32),
  'unit',
  'scenes',
  '     n',
  '    bias',
  '  st.dev',
  '     50%',
  '     95%',
  ' largest',
  'in 2 u ',
  'allowed',
].join('  ');

/** One line of the table. */
export function line(summary: Summary): string {
  const { row, scenes, count, bias, deviation, median, p95, largest, within, short } = summary;
  const number = (value: number) => (Number.isFinite(value) ? value.toFixed(4) : '–').padStart(8);
  const judged = Object.keys(row.allowed).length > 0;
  const allowed = Object.entries(row.allowed).map(([name, limit]) => `${name} ${limit}`);
  const verdict = short.length > 0 ? `short: ${short.join(', ')}` : judged ? 'pass' : 'told only';
  return [
    row.name.padEnd(32),
    row.unit.padEnd(4),
    String(scenes).padStart(6),
    String(count).padStart(6),
    ...[bias, deviation, median, p95, largest].map(number),
    percent(within).padStart(7),
    allowed.join(', ') || '–',
    verdict,
  ].join('  ');
}
