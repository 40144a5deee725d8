import { describe, expect, test } from 'vitest';
import { analyseBytes } from '@/analysis/analyse-bytes';
import { renderDark, renderFlat, renderFree, renderGrey } from '@/fixtures/scene/flat';
import type { ExifPlan, ScenePlan } from '@/fixtures/scene/plan';
import { renderScene } from '@/fixtures/scene/render';

const plan: ScenePlan = { width: 1000, height: 750, snrDb: 34, shadingCornerEv: -0.6 };
const exif = (fNumber: number): ExifPlan => ({ make: 'Aster', model: 'A-40', fNumber, iso: 100 });

// Truth by construction: each picture was rendered as one of its kind.
describe('kind auto', () => {
  const pictures: [string, string, () => Promise<Buffer>][] = [
    ['target', 'the target', async () => (await renderScene({ ...plan, fill: 0.9 })).bytes],
    [
      'target',
      'the target two stops under',
      async () => (await renderScene({ ...plan, exposureEv: -2 })).bytes,
    ],
    ['dark', 'the cap', () => renderDark({ width: 1000, height: 750, level: 3, noise: 2 })],
    [
      'dark',
      'the cap, all zeros',
      () => renderDark({ width: 1000, height: 750, level: 0, noise: 0 }),
    ],
    [
      'flat',
      'a plain surface at f/16',
      async () => (await renderFlat({ ...plan, exif: exif(16) })).bytes,
    ],
    [
      'flat',
      'the same, with dust',
      async () =>
        (
          await renderFlat({
            ...plan,
            exif: exif(22),
            dust: [{ x: 300, y: 200, sigma: 9, depth: 0.3 }],
          })
        ).bytes,
    ],
    [
      'grey',
      'a card that fills the frame at f/5.6',
      async () => (await renderFlat({ ...plan, exif: exif(5.6) })).bytes,
    ],
    [
      'grey',
      'a card before a dark ground',
      async () => (await renderGrey({ ...plan, exif: exif(5.6) })).bytes,
    ],
    [
      'grey',
      'a card two stops under',
      async () => (await renderGrey({ ...plan, exposureEv: -2 })).bytes,
    ],
    ['scene', 'a still life', async () => (await renderFree(plan)).bytes],
    [
      'scene',
      'another still life, dark',
      async () => (await renderFree({ ...plan, seed: 4, exposureEv: -2.5 })).bytes,
    ],
  ];
  test.each(pictures)('is told as %s: %s', async (kind, _, render) => {
    const analysis = await analyseBytes(await render());
    expect(analysis.kind).toBe(kind);
    expect(analysis.kindConfidence).toBeGreaterThan(0.5);
    expect(analysis.kindConfidence).toBeLessThanOrEqual(1);
  });

  test('a kind that was given has no confidence, and a picture that leaves doubt says so', async () => {
    const { bytes } = await renderFlat(plan);
    expect((await analyseBytes(bytes, { kind: 'grey' })).kindConfidence).toBeUndefined();
    // Nothing tells a card from a flat field where the aperture isn't known.
    const told = await analyseBytes(bytes);
    expect(told.warnings.map(({ code }) => code)).toContain('kind-unsure');
  });
});
