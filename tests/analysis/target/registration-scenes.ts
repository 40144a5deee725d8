import type { ScenePlan } from '../../../fixtures/scene/plan.ts';
import { createRandom } from '../../../fixtures/scene/random.ts';

/** Frame sizes a scene is drawn from; the larger ones are for the study that is run by hand. */
export const smallFrames = [
  [640, 480],
  [960, 1280],
  [1280, 960],
  [1500, 1000],
] as const;
export const allFrames = [...smallFrames, [2000, 1500], [3000, 2000], [4000, 3000]] as const;

/**
 * A scene drawn from all that measurements.md, "How close", row registration, allows: any rotation, tilt to 8°, distortion to 8 % at the
 * corner, blur to σ 2.5 px, −2 to +1 EV, the target filling 60 to 100 % of the frame's height, JPEG 85 4:2:0, SNR from 23 dB.
 */
export function drawScene(
  seed: number,
  frames: readonly (readonly [number, number])[] = smallFrames,
): ScenePlan {
  const random = createRandom(seed);
  const between = (low: number, high: number) => low + (high - low) * random();
  const target = random() < 0.5 ? '4x3' : '3x2';
  const [width, height] = frames[Math.floor(random() * frames.length)]!;
  const rotationDegrees = between(-180, 180);
  const tilt = between(0, 8);
  const tiltTowards = between(0, 2 * Math.PI);
  const aspect = target === '4x3' ? 4 / 3 : 3 / 2;
  return {
    target,
    width,
    height,
    fill: Math.min(between(0.6, 1), largestFill(rotationDegrees, aspect, width / height)),
    rotationDegrees,
    tiltXDegrees: tilt * Math.cos(tiltTowards),
    tiltYDegrees: tilt * Math.sin(tiltTowards),
    offset: [between(-0.02, 0.02) * width, between(-0.02, 0.02) * height],
    distortionCornerPercent: between(-8, 8),
    blurSigma: between(0.5, 2.5),
    exposureEv: between(-2, 1),
    whiteGains: [between(0.85, 1.15), 1, between(0.85, 1.15)],
    toneContrast: between(0.8, 1.4),
    shadingCornerEv: between(-1, 0),
    lightTiltEv: between(-0.3, 0.3),
    snrDb: between(23, 40),
    format: { type: 'jpeg', quality: 85, subsampling: '4:2:0' },
    seed,
  };
}

/** So that a turned target stays in view but for its corners: nine tenths of its length in the frame either way. */
function largestFill(rotationDegrees: number, aspect: number, frameAspect: number): number {
  const angle = (rotationDegrees * Math.PI) / 180;
  const cos = Math.abs(Math.cos(angle));
  const sin = Math.abs(Math.sin(angle));
  return Math.min(1 / (aspect * sin + cos), frameAspect / (aspect * cos + sin)) / 0.9;
}
