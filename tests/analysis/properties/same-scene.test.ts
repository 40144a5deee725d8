import fc from 'fast-check';
import { expect, test } from 'vitest';
import { analyseBytes } from '@/analysis/analyse-bytes';
import type { Analysis } from '@/analysis/result';
import type { ScenePlan } from '@/fixtures/scene/plan';
import { renderScene } from '@/fixtures/scene/render';

/** What describes the camera and not how the picture is held or stored. */
const whole = [
  'exposure.bias',
  'tone.contrast',
  'colour.saturation',
  'colour.error',
  'fringe.redScale',
  'fringe.blueScale',
  'shading.corner',
  'distortion.corner',
];
const find = (a: Analysis, name: string, zone?: string) =>
  a.metrics.find((m) => m.name === name && m.zone === zone && !m.edge);

const base = fc.record({
  blurSigma: fc.double({ min: 0.6, max: 1.2, noNaN: true }),
  exposureEv: fc.double({ min: -0.8, max: 0.2, noNaN: true }),
  redScalePermille: fc.double({ min: -1, max: 1, noNaN: true }),
  seed: fc.integer({ min: 1, max: 1e6 }),
});

const measure = async (plan: ScenePlan) =>
  analyseBytes(
    (await renderScene({ width: 1200, height: 900, fill: 0.9, snrDb: 38, ...plan })).bytes,
    {
      kind: 'target',
    },
  );

/** Two photographs agree: every quantity within three of both doubts together. */
function expectSame(one: Analysis, other: Analysis, except: readonly string[] = []) {
  for (const name of whole.filter((n) => !except.includes(n))) {
    const [a, b] = [find(one, name)!, find(other, name)!];
    const doubt = Math.hypot(a.uncertainty, b.uncertainty);
    expect(Math.abs(a.value - b.value), name).toBeLessThan(3 * doubt + 1e-6);
  }
  for (const zone of ['centre', 'corners']) {
    const [a, b] = [find(one, 'sharpness.mtf50', zone)!, find(other, 'sharpness.mtf50', zone)!];
    expect(Math.abs(a.value - b.value), zone).toBeLessThan(
      3 * Math.hypot(a.uncertainty, b.uncertainty),
    );
  }
}

const runs = { numRuns: 2, seed: 20261201, endOnFailure: true };

test('turning the camera by 90° or 180° changes nothing but the place', async () => {
  await fc.assert(
    fc.asyncProperty(base, fc.constantFrom(90, 180), async (plan, turn) => {
      const portrait = turn === 90 ? { width: 900, height: 1200, fill: 0.675 } : {};
      const [one, other] = [
        await measure(plan),
        await measure({ ...plan, ...portrait, rotationDegrees: turn }),
      ];
      expectSame(one, other);
    }),
    runs,
  );
}, 120_000);

test('storing it turned or mirrored, with the Exif orientation that puts it right, changes nothing', async () => {
  await fc.assert(
    fc.asyncProperty(base, fc.constantFrom(2, 3, 5, 6, 8), async (plan, orientation) => {
      const png: ScenePlan = { ...plan, format: { type: 'png' } };
      const [one, other] = [await measure(png), await measure({ ...png, orientation })];
      expect(other.metrics).toEqual(one.metrics);
    }),
    runs,
  );
}, 120_000);

test('more or less light moves the exposure by as much, and nothing else', async () => {
  await fc.assert(
    fc.asyncProperty(base, fc.double({ min: -0.7, max: -0.3, noNaN: true }), async (plan, ev) => {
      const one = await measure(plan);
      const other = await measure({ ...plan, exposureEv: plan.exposureEv + ev });
      expectSame(one, other, ['exposure.bias']);
      const moved = find(other, 'exposure.bias')!.value - find(one, 'exposure.bias')!.value;
      expect(Math.abs(moved - ev)).toBeLessThan(0.02);
    }),
    runs,
  );
}, 120_000);

test('a wider border about the target changes nothing', async () => {
  await fc.assert(
    fc.asyncProperty(base, fc.integer({ min: 40, max: 200 }), async (plan, border) => {
      const one = await measure(plan);
      const [width, height] = [1200 + 2 * border, 900 + 2 * border];
      const other = await measure({ ...plan, width, height, fill: (0.9 * 900) / height });
      // Shading and distortion are told for the frame's corners, which lie further out.
      expectSame(one, other, ['shading.corner', 'distortion.corner']);
    }),
    runs,
  );
}, 120_000);
