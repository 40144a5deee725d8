import { describe, expect, test } from 'vitest';
import { decode } from '@/analysis/decode';
import { MeasurementError } from '@/analysis/errors';
import { lightScale, type TonePoint } from '@/analysis/exposure/lent-tone';
import { measureFlat } from '@/analysis/kinds/measure-flat';
import { type DustSpeck, type FlatPlan, renderFlat, renderFree } from '@/fixtures/scene/flat';
import { createTone, encodeSrgb } from '@/fixtures/scene/light';
import { createRandom } from '@/fixtures/scene/random';

const size = { width: 1200, height: 900 };

async function measure(plan: FlatPlan, tone?: readonly TonePoint[]) {
  const { bytes, truth } = await renderFlat({ ...size, ...plan });
  const { frame } = await decode(bytes);
  const result = measureFlat(frame, lightScale(frame, tone));
  const find = (name: string) => result.metrics.find((m) => m.name === name && !m.zone)!;
  return { ...result, truth, find };
}

/** Shadows clear of one another, σ from 1.5 to 25 px, the shallowest six times the noise of a pixel. */
function plantDust(seed: number, noise: number): DustSpeck[] {
  const random = createRandom(seed * 31);
  const dust: DustSpeck[] = [];
  while (dust.length < 8) {
    const sigma = 1.5 + 23.5 * random() ** 2;
    const depth = Math.max(6 * noise * (1 + 2 * random()), 0.05);
    const speck = { x: size.width * random(), y: size.height * random(), sigma, depth };
    if (dust.every((d) => Math.hypot(d.x - speck.x, d.y - speck.y) > 4 * (d.sigma + sigma)))
      dust.push(speck);
  }
  return dust;
}

// Truth by construction: what renderFlat planted. Limit: measurements.md, "all found, none invented".
describe('dust.count', () => {
  const cases: [string, FlatPlan & { snrDb: number }][] = [
    ['PNG at 34 dB', { snrDb: 34, format: { type: 'png' } }],
    [
      'PNG at 40 dB, −1.5 EV in the corners',
      { snrDb: 40, shadingCornerEv: -1.5, format: { type: 'png' } },
    ],
    [
      'JPEG 92 4:2:0 at 30 dB, uneven light',
      {
        snrDb: 30,
        shadingCornerEv: -1,
        lightTiltEv: 0.2,
        format: { type: 'jpeg', quality: 92, subsampling: '4:2:0' },
      },
    ],
    [
      'JPEG 92 at 36 dB, contrasty and bright',
      {
        snrDb: 36,
        toneContrast: 1.3,
        exposureEv: 0.6,
        shadingCornerEv: -1.2,
        format: { type: 'jpeg', quality: 92, subsampling: '4:4:4' },
      },
    ],
  ];
  for (const [name, plan] of cases)
    test.each([1, 2, 3, 4])(`${name}, seed %d: all found, none invented`, async (seed) => {
      const dust = plantDust(seed, 10 ** (-plan.snrDb / 20));
      const { plots, find } = await measure({ ...plan, seed, dust });
      const near = plots.spots!.map((spot) => {
        const own = dust.findIndex(
          (d) => Math.hypot(d.x - spot.x, d.y - spot.y) < Math.max(4, 1.5 * d.sigma),
        );
        return own < 0 ? `invented ${JSON.stringify(spot)}` : `${own}`;
      });
      expect(near.sort()).toEqual(dust.map((_, i) => `${i}`));
      expect(find('dust.count').value).toBe(dust.length);
    });

  test.each([
    { format: { type: 'png' } },
    { format: { type: 'jpeg', quality: 92, subsampling: '4:2:0' } },
    { snrDb: 46, format: { type: 'jpeg', quality: 85, subsampling: '4:2:0' } },
    { snrDb: 24, format: { type: 'jpeg', quality: 92, subsampling: '4:2:0' } },
  ] as FlatPlan[])('rounding’s contours and coarse noise invent none: %j', async (plan) => {
    const { plots } = await measure({ ...plan, shadingCornerEv: -1.3, lightTiltEv: -0.15 });
    expect(plots.spots).toEqual([]);
  });
});

describe('dust.largest and dust.contrast', () => {
  // Truth: a Gaussian of deviation σ is 2 √(2 ln 2) σ wide at half its depth.
  test.each([4, 9, 18])('of one shadow of σ %d px come back within 2 u', async (sigma) => {
    const { find } = await measure({
      snrDb: 36,
      shadingCornerEv: -0.8,
      dust: [{ x: 420, y: 510, sigma, depth: 0.2 }],
    });
    for (const [name, truth] of [
      ['dust.largest', 2 * Math.sqrt(2 * Math.LN2) * sigma],
      ['dust.contrast', 20],
    ] as const) {
      const { value, uncertainty } = find(name);
      expect(Math.abs(value - truth), `${name} ${value} ± ${uncertainty}`).toBeLessThan(
        2 * uncertainty,
      );
    }
  });
});

/** Greys of a target shot with the planted tone curve, as a run lends them. */
function lend(contrast: number): TonePoint[] {
  const tone = createTone(contrast);
  return [0.03, 0.05, 0.08, 0.12, 0.18, 0.25, 0.34, 0.45, 0.6, 0.75].map((reflectance) => ({
    reflectance,
    code: encodeSrgb(tone.apply(reflectance)),
  }));
}

describe('shading', () => {
  // Truth by construction; limit 0.03 EV (measurements.md).
  test.each([
    { contrast: 1.4, shadingCornerEv: -1.2, lightTiltEv: 0 },
    { contrast: 0.8, shadingCornerEv: -1.8, lightTiltEv: 0.3 },
    { contrast: 1, shadingCornerEv: 0, lightTiltEv: 0 },
  ])('through a lent tone response comes back within 0.03 EV: %j', async (plan) => {
    const { contrast, ...rest } = plan;
    const { find, truth, warnings } = await measure(
      { ...rest, toneContrast: contrast, snrDb: 34 },
      lend(contrast),
    );
    expect(Math.abs(find('shading.corner').value - truth.shadingCorner)).toBeLessThan(0.03);
    expect(Math.abs(find('shading.asymmetry').value - truth.shadingAsymmetry)).toBeLessThan(0.03);
    expect(warnings).toEqual([]);
  });

  test('through the sRGB curve a contrasty camera’s shading is off, but within 3 u', async () => {
    const { find } = await measure({ shadingCornerEv: -1, toneContrast: 1.4, snrDb: 36 });
    const { value, uncertainty } = find('shading.corner');
    expect(Math.abs(value + 1)).toBeGreaterThan(0.2);
    expect(Math.abs(value + 1)).toBeLessThan(3 * uncertainty);
  });
});

describe('refusals', () => {
  test('a frame that shows something is refused', async () => {
    const { bytes } = await renderFree(size);
    const { frame } = await decode(bytes);
    expect(() => measureFlat(frame, lightScale(frame))).toThrow(
      /differs by \d+ % from place to place/,
    );
  });

  test('a frame that is white in the middle is refused', async () => {
    await expect(measure({ exposureEv: 3, shadingCornerEv: -1 })).rejects.toThrow(MeasurementError);
  });
});

// A clean frame by construction: nothing is planted, so that nothing may be found. Limit: measurements.md, "none invented".
test.each([92, 85, 75])(
  'little noise in a JPEG of quality %i leaves block patterns, which are no dust',
  async (quality) => {
    const format = { type: 'jpeg', quality, subsampling: '4:4:4' } as const;
    const plan = { snrDb: 44, shadingCornerEv: -0.4, lightTiltEv: 0.1, seed: 3, format };
    expect((await measure(plan)).find('dust.count').value).toBe(0);
  },
);

// Truth by construction. Limit: measurements.md, shading within 0.03 EV.
test('a fall of 2 EV through a steep curve is still an even surface', async () => {
  const plan = { toneContrast: 1.4, shadingCornerEv: -2, lightTiltEv: 0.2, snrDb: 30, seed: 15 };
  const greys = [0.03, 0.05, 0.08, 0.12, 0.18, 0.25, 0.34, 0.45, 0.6, 0.75];
  const tone = createTone(1.4);
  const lent = greys.map((reflectance) => ({
    reflectance,
    code: encodeSrgb(tone.apply(reflectance)),
  }));
  const { find, truth } = await measure({ ...plan, format: { type: 'png' } }, lent);
  expect(Math.abs(find('shading.corner').value - truth.shadingCorner)).toBeLessThan(0.03);
});
