import { describe, expect, test } from 'vitest';
import { analyseBytes } from '@/analysis/analyse-bytes';
import { decode } from '@/analysis/decode';
import { readTimingPage } from '@/analysis/time/read-timing-page';
import { renderScene } from '@/fixtures/scene/render';
import { renderTimingPage, type TimingPlan } from '@/fixtures/scene/timing-page';
import { drawTimingScene, elapsedTruth } from './timing-scenes';

async function read(plan: TimingPlan) {
  const { frame, capture } = await decode(await renderTimingPage(plan));
  return readTimingPage(frame, capture.exposureTime);
}

// Truth by construction: fixtures/scene/timing-page.ts mixes the frames that the shutter saw and knows nothing of the reader.
describe('the timing page is read within one frame of a 60 Hz screen', () => {
  test.each(Array.from({ length: 12 }, (_, i) => i))(
    'any place, turn, tilt and light: %d',
    async (seed) => {
      const plan = drawTimingScene(seed);
      const { elapsed, frameTime } = await read(plan);
      expect(frameTime).toBeCloseTo(16.67, 6);
      expect(Math.abs(elapsed - elapsedTruth(plan)), JSON.stringify(plan)).toBeLessThan(16.67);
    },
  );

  const upright = { width: 900, height: 700, blurSigma: 1, exposureFrames: 0.6 } as const;
  test.each([
    ['half in each of two frames', { startFrame: 57.7 }],
    ['across the mark', { startFrame: 239.7 }],
    ['just before the mark', { startFrame: 230.1 }],
    ['1.5 EV over', { startFrame: 101.7, exposureEv: 1.5 }],
    ['1.5 EV under, with noise', { startFrame: 101.7, exposureEv: -1.5, snrDb: 25 }],
    [
      'tilted by 30° both ways',
      { startFrame: 12.2, tiltXDegrees: 21.5, tiltYDegrees: 21.5, fill: 0.7 },
    ],
    ['a portrait picture', { startFrame: 33.3, rotationDegrees: 90, fill: 0.7 }],
    ['Exif says it lies on its side', { startFrame: 33.3, orientation: 6 }],
    ['over four frames', { startFrame: 77.4, exposureFrames: 4 }],
  ] as const)('%s', async (_, plan) => {
    const { elapsed } = await read({ ...upright, ...plan });
    expect(Math.abs(elapsed - elapsedTruth(plan))).toBeLessThan(16.67);
  });

  test.each([8.33, 6.94, 20])('a screen with frames of %d ms says so itself', async (frameTime) => {
    const plan = { ...upright, frameTime, startFrame: 61.3 };
    const reading = await read(plan);
    expect(reading.frameTime).toBeCloseTo(frameTime, 6);
    expect(Math.abs(reading.elapsed - elapsedTruth(plan))).toBeLessThan(frameTime);
  });
});

test('kind auto knows the timing page', async () => {
  const bytes = await renderTimingPage({ width: 800, height: 600, startFrame: 30.2 });
  const { kind, kindConfidence, metrics } = await analyseBytes(bytes);
  expect(kind).toBe('lag');
  expect(kindConfidence).toBeGreaterThan(0.9);
  expect(metrics[0]?.name).toBe('lag.shutter');
});

describe('what can’t be read is refused', () => {
  test('another picture', async () => {
    const { bytes } = await renderScene({ width: 800, height: 600 });
    await expect(analyseBytes(bytes, { kind: 'lag' })).rejects.toMatchObject({
      code: 'no-timing-page',
    });
  });
  test('a ring cut off', async () => {
    await expect(read({ width: 800, height: 600, offset: [180, 0] })).rejects.toMatchObject({
      code: 'no-timing-page',
    });
  });
  test('a whole round of the hand in one exposure', async () => {
    await expect(read({ width: 800, height: 600, exposureFrames: 240 })).rejects.toMatchObject({
      code: 'timing-page-unclear',
    });
  });
});

test('a mirrored page gives no time', async () => {
  const plan = { width: 800, height: 600, startFrame: 20.2 };
  const { frame } = await decode(await renderTimingPage(plan));
  const data = frame.data.slice();
  for (let row = 0; row < frame.height; row++)
    for (let col = 0; col < frame.width; col++)
      for (let i = 0; i < 3; i++)
        data[(row * frame.width + col) * 3 + i] =
          frame.data[(row * frame.width + frame.width - 1 - col) * 3 + i]!;
  expect(() => readTimingPage({ ...frame, data }, null)).toThrow(/not found/);
});
