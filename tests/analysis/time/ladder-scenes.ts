import { analyseBytes } from '@/analysis/analyse-bytes';
import type { GroupResult } from '@/analysis/result';
import { measureGroup } from '@/analysis/time/group';
import type { ExifPlan, ScenePlan } from '@/fixtures/scene/plan';
import { renderScene } from '@/fixtures/scene/render';

/** A rung: what the Exif says, and the light that really fell, EV. */
export interface RungPlan {
  readonly exif: ExifPlan;
  readonly exposureEv: number;
}

/** Full stops from 1/500 to 1/30: labels and the exact times behind them (ISO 516's series). */
export const rungTimes = [
  [1 / 500, 1 / 512],
  [1 / 250, 1 / 256],
  [1 / 125, 1 / 128],
  [1 / 60, 1 / 64],
  [1 / 30, 1 / 32],
] as const;

/** Rungs at f/5.6 with the middle one at `base` EV, each off by its planted error. */
export function rungsOf(base: number, planted: readonly number[]): RungPlan[] {
  return planted.map((error, i) => {
    const [label, exact] = rungTimes[i]!;
    return {
      exif: {
        exposureTime: label,
        fNumber: 5.6,
        iso: 100,
        program: 1,
        make: 'Halvard Optik',
        model: 'P5',
      },
      exposureEv: base + Math.log2(exact * 128) + error,
    };
  });
}

export async function photographLadder(
  scene: ScenePlan,
  rungs: readonly RungPlan[],
): Promise<GroupResult> {
  const shots: Parameters<typeof measureGroup>[1][number][] = [];
  for (const [i, { exif, exposureEv }] of rungs.entries()) {
    const { bytes } = await renderScene({
      ...scene,
      exif,
      exposureEv,
      seed: (scene.seed ?? 1) * 10 + i,
    });
    shots.push({ name: `rung-${i}.jpg`, analysis: await analyseBytes(bytes, { kind: 'ladder' }) });
  }
  return measureGroup('ladder', shots);
}
