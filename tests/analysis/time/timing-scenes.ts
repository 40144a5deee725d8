import { createRandom } from '@/fixtures/scene/random';
import type { TimingPlan } from '@/fixtures/scene/timing-page';

/** A seeded photograph of the timing page on a 60 Hz screen, as measurements.md and the issue want it read. */
export function drawTimingScene(seed: number, frameTime = 16.67): TimingPlan {
  const random = createRandom(seed * 7919 + 13);
  const between = (low: number, high: number) => low + (high - low) * random();
  const pick = <T>(choices: readonly T[]): T => choices[Math.floor(random() * choices.length)]!;
  const [width, height] = pick([
    [640, 480],
    [1000, 750],
    [1600, 1200],
    [900, 1200],
  ] as const);
  const angle = between(0, 30);
  const direction = between(0, 2 * Math.PI);
  const exposureTime = pick([1 / 32, 1 / 64, 1 / 128, 1 / 256]);
  return {
    width,
    height,
    fill: between(0.5, 0.85) * Math.min(1, width / height),
    rotationDegrees: pick([0, 0, 90, -90, 180]) + between(-20, 20),
    tiltXDegrees: angle * Math.cos(direction),
    tiltYDegrees: angle * Math.sin(direction),
    distortionCornerPercent: between(-4, 2),
    blurSigma: between(0.6, width < 900 ? 1.5 : 3),
    toneContrast: between(0.8, 1.4),
    shadingCornerEv: between(-1, 0),
    exposureEv: between(-1.5, 1.5),
    snrDb: between(24, 40),
    veil: between(0, 0.05),
    format: {
      type: 'jpeg',
      quality: Math.round(between(75, 95)),
      subsampling: pick(['4:2:0', '4:4:4'] as const),
    },
    frameTime,
    startFrame: between(0, 240),
    exposureFrames: (exposureTime * 1000) / frameTime,
    ...(random() < 0.6 ? { exif: { exposureTime, make: 'Halvard Optik', model: 'P5' } } : {}),
    seed: seed + 1,
  };
}

/** From the mark to the start of the exposure, ms, as the reader counts it: what frame k shows stands for k frames. */
export function elapsedTruth({ frameTime = 16.67, startFrame = 0 }: TimingPlan): number {
  const frames = 2 * Math.round(2000 / frameTime);
  const elapsed = (startFrame - 0.5) * frameTime;
  return elapsed >= 0.85 * frames * frameTime ? elapsed - frames * frameTime : elapsed;
}
