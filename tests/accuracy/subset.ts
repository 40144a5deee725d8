import { beforeAll, expect, test } from 'vitest';
import { rows } from './rows.ts';
import { runScene, type SceneResult } from './run-scene.ts';
import type { SuiteName } from './suites.ts';
import { line, summarise } from './summary.ts';

/** Every third seed, so that the subset samples the whole run instead of its beginning. */
const stride = 3;

/**
 * Some seeds of a suite, under the limits of measurements.md that `npm run test:accuracy` applies to 200. The share within ±2 u
 * is left to the whole run (a handful of scenes says little of it), and so is what it is known to call short.
 */
export function testSuite(suite: SuiteName, scenes: number): void {
  const results: SceneResult[] = [];
  beforeAll(async () => {
    for (let i = 1; i <= scenes; i++) {
      results.push(await runScene({ suite, seed: i * stride }));
    }
  }, 240_000);

  const mine = rows.filter(
    ({ suites, allowed, notMet }) =>
      suites.includes(suite) && Object.keys(allowed).length > 0 && !notMet,
  );
  // Source of every limit: measurements.md, "How close". Truth: what the renderer planted.
  test.each(mine)(`$name within its allowance over ${scenes} scenes of suite ${suite}`, (row) => {
    const summary = summarise(row, results, false);
    const plans = results.map(({ seed, plan, failure }) => ({ seed, failure, plan }));
    const evidence = `${line(summary)}\n${plans.map((p) => JSON.stringify(p)).join('\n')}`;
    expect(summary.short, evidence).toEqual([]);
  });
}
