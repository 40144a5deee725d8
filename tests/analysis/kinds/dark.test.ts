import { describe, expect, test } from 'vitest';
import { linearTable } from '@/analysis/colour/srgb';
import { decode } from '@/analysis/decode';
import { MeasurementError } from '@/analysis/errors';
import type { Frame } from '@/analysis/image';
import { measureDark } from '@/analysis/kinds/measure-dark';
import { fitCensoredNormal } from '@/analysis/noise/censored-normal';
import { findHotPixels } from '@/analysis/noise/find-hot-pixels';
import { type DarkPlan, renderDark } from '@/fixtures/scene/flat';
import { createRandom } from '@/fixtures/scene/random';
import { missing, runPython } from '../../oracles/oracle';

const size = { width: 900, height: 700 };

async function render(plan: Partial<DarkPlan>): Promise<Frame> {
  const bytes = await renderDark({ ...size, format: { type: 'png' }, ...plan });
  return (await decode(bytes)).frame;
}

function frameOf(width: number, height: number, codeAt: (i: number) => number): Frame {
  const data = Uint8Array.from({ length: width * height * 3 }, (_, i) =>
    Math.min(255, Math.max(0, Math.round(codeAt(i)))),
  );
  const table = linearTable(255);
  return { width, height, data, maxCode: 255, toLinear: [table, table, table], toSrgb: null };
}

/** Twenty hot pixels at least 12 px apart, the weakest 6 σ (and two codes and a bit) high. */
function plantHot(seed: number, level: number, least: number) {
  const random = createRandom(seed);
  const hot: { x: number; y: number; code: number }[] = [];
  while (hot.length < 20) {
    const x = Math.floor(random() * size.width);
    const y = Math.floor(random() * size.height);
    if (hot.some((other) => Math.hypot(other.x - x, other.y - y) < 12)) continue;
    const height = hot.length < 5 ? least : least * (1 + 4 * random());
    hot.push({ x, y, code: Math.min(250, Math.ceil(level + height)) });
  }
  return hot;
}

const value = (frame: Frame, name: string) =>
  measureDark(frame).metrics.find((m) => m.name === name)!;

// Truth by construction: what renderDark planted. Limit: measurements.md, "all found, none invented".
describe('dark.hot', () => {
  const cases: [string, Partial<DarkPlan> & { level: number; noise: number }, number][] = [
    ['quiet', { level: 2, noise: 0.4 }, 2.4],
    ['usual', { level: 2, noise: 1 }, 6],
    ['black cut off', { level: 0, noise: 1 }, 6],
    ['noisy', { level: 12, noise: 4 }, 24],
    ['rows out of step', { level: 8, noise: 1.5, banding: 1 }, 9],
    ['no noise at all', { level: 0, noise: 0 }, 3],
    [
      'JPEG 92',
      { level: 3, noise: 1, format: { type: 'jpeg', quality: 92, subsampling: '4:4:4' } },
      50,
    ],
    [
      'JPEG 85 4:2:0',
      { level: 5, noise: 2, format: { type: 'jpeg', quality: 85, subsampling: '4:2:0' } },
      60,
    ],
  ];
  for (const [name, plan, least] of cases)
    test.each([1, 2, 3, 4])(`${name}, seed %d: all found, none invented`, async (seed) => {
      const hot = plantHot(seed, plan.level, least);
      const found = findHotPixels(await render({ ...plan, seed, hot }));
      const planted = hot.map(({ x, y }) => `${x},${y}`).sort();
      const near = found.map(({ x, y }) => {
        const own = hot.find((h) => Math.max(Math.abs(h.x - x), Math.abs(h.y - y)) <= 1);
        return own ? `${own.x},${own.y}` : `invented ${x},${y}`;
      });
      expect(near.sort()).toEqual(planted);
    });

  test.each([1, 2, 3])('noise with a heavy tail invents none, seed %d', (seed) => {
    // Laplace noise of σ 1.5: 700,000 values reach 9 σ.
    const random = createRandom(seed);
    const frame = frameOf(size.width, size.height, () => {
      const u = random() - 0.5;
      return 20 - Math.sign(u) * (1.5 / Math.SQRT2) * Math.log(1 - 2 * Math.abs(u));
    });
    expect(findHotPixels(frame)).toEqual([]);
  });

  test('glow in a corner is neither hot nor banding', () => {
    const random = createRandom(9);
    const frame = frameOf(600, 400, (i) => {
      const [x, y] = [Math.floor(i / 3) % 600, Math.floor(i / 1800)];
      const noise = random() + random() + random() + random() - 2;
      return 4 + 30 * Math.exp(-(x + y) / 90) + 1.7 * noise;
    });
    expect(findHotPixels(frame)).toEqual([]);
    expect(value(frame, 'dark.banding').value).toBeLessThan(0.15);
  });

  test('a hot pixel of one colour counts', async () => {
    const frame = await render({ level: 4, noise: 1 });
    for (const [channel, x] of [
      [0, 100],
      [1, 200],
      [2, 300],
    ] as const)
      frame.data[(120 * frame.width + x) * 3 + channel] = 14;
    expect(
      findHotPixels(frame)
        .map(({ x }) => x)
        .sort(),
    ).toEqual([100, 200, 300]);
  });
});

describe('level, noise and banding', () => {
  // Truth by construction.
  test.each([
    { level: 6, noise: 1.5, banding: 0 },
    { level: 2, noise: 1.2, banding: 0 },
    { level: 0, noise: 1, banding: 0 },
    { level: -0.8, noise: 1.3, banding: 0 },
    { level: 8, noise: 2, banding: 0.6 },
  ])('%j come back within 2 u', async (plan) => {
    const frame = await render({ ...plan, seed: 5, hot: plantHot(5, plan.level, 60) });
    for (const [name, truth] of Object.entries({
      'dark.level': plan.level,
      'dark.noise': plan.noise,
      'dark.banding': plan.banding,
    })) {
      const { value: measured, uncertainty } = value(frame, name);
      // The rows' own offsets shift the mean by chance.
      const chance = name === 'dark.level' ? plan.banding / Math.sqrt(size.height) : 0;
      expect(Math.abs(measured - truth), `${name} ${measured}`).toBeLessThan(
        2 * Math.hypot(uncertainty, chance),
      );
    }
  });

  test('a frame of zeros is measured: nothing in it', async () => {
    const { metrics } = measureDark(frameOf(200, 150, () => 0));
    expect(metrics.map(({ value: v }) => v)).toEqual([0, 0, 0, 0]);
    expect(metrics.every(({ uncertainty }) => Number.isFinite(uncertainty))).toBe(true);
  });

  test('a bright frame is refused, and what was seen is named', () => {
    const bright = () => measureDark(frameOf(200, 150, () => 120));
    expect(bright).toThrow(MeasurementError);
    expect(bright).toThrow(/mean code is 120/);
  });
});

// Independent implementation: scipy's maximum of the same likelihood.
test.skipIf(missing('python'))(
  'the cut-off normal’s mean and deviation agree with scipy’s maximum',
  () => {
    const counts = [5200, 2300, 1500, 700, 240, 50, 8];
    const script = `
import json, sys
import numpy as np
from scipy.optimize import minimize
from scipy.stats import norm
n = np.array(json.loads(sys.argv[1])); k = np.arange(len(n))
def loss(p):
    m, s = p[0], np.exp(p[1])
    low = np.where(k == 0, -np.inf, k - 0.5)
    return -(n * np.log(norm.cdf((k + 0.5 - m) / s) - norm.cdf((low - m) / s))).sum()
best = minimize(loss, [0.5, 0.3], method='Nelder-Mead', options={'xatol': 1e-9, 'fatol': 1e-9})
print(json.dumps([best.x[0], float(np.exp(best.x[1]))]))`;
    const [mean, deviation] = runPython(script, [JSON.stringify(counts)]) as [number, number];
    const fit = fitCensoredNormal(counts);
    expect(fit.mean).toBeCloseTo(mean, 3);
    expect(fit.deviation).toBeCloseTo(deviation, 3);
  },
);
