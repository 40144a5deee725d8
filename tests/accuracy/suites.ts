import type { FormatPlan, ScenePlan } from '../../fixtures/scene/plan.ts';
import { createRandom } from '../../fixtures/scene/random.ts';
import { sceneTruth } from '../../fixtures/scene/truth.ts';

/** Sets of conditions, each after a row or rows of measurements.md's "How close". */
export const sceneSuites = [
  'registration',
  'clean',
  'noisy',
  'subsampled',
  'exposure',
  'colour',
  'noise',
  'shading',
] as const;
export type SceneSuite = (typeof sceneSuites)[number];
/** Suites whose scenes are several photographs: see run-group.ts. */
export const groupSuites = ['ladder', 'timing'] as const;
export type GroupSuite = (typeof groupSuites)[number];
/** Suites of photographs without a target: see run-plain.ts. */
export const plainSuites = ['lens cap', 'dust', 'card', 'flat field'] as const;
export type PlainSuite = (typeof plainSuites)[number];
export const suiteNames = [...sceneSuites, ...groupSuites, ...plainSuites] as const;
export type SuiteName = SceneSuite | GroupSuite | PlainSuite;

export interface Dice {
  between(low: number, high: number): number;
  chance(probability: number): boolean;
  pick<T>(choices: readonly T[]): T;
}

/** The seeded plan of a suite's scene; redrawn until it meets the suite's own condition. */
export function planOf(suite: SceneSuite, seed: number): ScenePlan {
  const dice = diceOf(suite, seed);
  for (let attempt = 0; attempt < 500; attempt++) {
    const { plan, accept } = suites[suite](dice);
    if (accept(plan)) return { ...plan, seed: seed + 1 };
  }
  throw new Error(`no plan of suite ${suite} met its condition, seed ${seed}`);
}

export function diceOf(suite: SuiteName, seed: number): Dice {
  const random = createRandom(seed * 7919 + suiteNames.indexOf(suite) * 104729);
  return {
    between: (low, high) => low + (high - low) * random(),
    chance: (probability) => random() < probability,
    pick: (choices) => choices[Math.floor(random() * choices.length)]!,
  };
}

type Draw = (dice: Dice) => { plan: ScenePlan; accept: (plan: ScenePlan) => boolean };

const ringsInFrame = (plan: ScenePlan) => Object.keys(sceneTruth(plan).rings).length === 5;
const unclipped = (plan: ScenePlan) => sceneTruth(plan).clippedDiscs.length === 0;

/** A camera on a stand: nearly square to the target, which nearly fills the frame. */
export function stand(dice: Dice): ScenePlan {
  const target = dice.pick(['4x3', '4x3', '3x2'] as const);
  return {
    target,
    width: target === '4x3' ? 2000 : 2160,
    height: target === '4x3' ? 1500 : 1440,
    fill: dice.between(0.88, 0.98),
    rotationDegrees: dice.between(-3, 3),
    tiltXDegrees: dice.between(-2, 2),
    tiltYDegrees: dice.between(-2, 2),
    offset: [dice.between(-15, 15), dice.between(-12, 12)],
    distortionCornerPercent: dice.between(-3, 2),
  };
}

/** Blur with an MTF50 of 0.08 … 0.45 cy/px everywhere: σ = 0.18739 / MTF50 (the Gaussian's own relation). */
function blur(dice: Dice): ScenePlan['blurSigma'] {
  const centre = 0.18739 / dice.between(0.16, 0.45);
  return { centre, corner: Math.min(centre * dice.between(1, 1.8), 0.18739 / 0.08) };
}

function fringes(dice: Dice): ScenePlan {
  const shift = () => [dice.between(-0.3, 0.3), dice.between(-0.3, 0.3)] as const;
  return {
    redScalePermille: dice.between(-1.5, 1.5),
    blueScalePermille: dice.between(-1.5, 1.5),
    ...(dice.chance(0.5) ? { redShift: shift(), blueShift: shift() } : {}),
  };
}

export function rendering(dice: Dice): ScenePlan {
  return {
    toneContrast: dice.between(0.8, 1.4),
    whiteGains: [dice.between(0.92, 1.08), 1, dice.between(0.92, 1.08)],
    shadingCornerEv: dice.between(-1.5, 0),
  };
}

export function jpeg(quality: number, subsampling: '4:4:4' | '4:2:0'): FormatPlan {
  return { type: 'jpeg', quality: Math.round(quality), subsampling };
}

const sizes = [
  [640, 480],
  [640, 480],
  [1000, 750],
  [1500, 1000],
  [2000, 1500],
  [2000, 1500],
  [2592, 1944],
  [4000, 3000],
] as const;

const suites: Record<SceneSuite, Draw> = {
  /** Any rotation, tilt to 8°, barrel or pincushion to 8 %, σ to 2.5 px, −2 to +1 EV, VGA to 24 MP, 60–100 %, JPEG 85 4:2:0, 23 dB. */
  registration(dice) {
    const size = dice.chance(0.02) ? ([6000, 4000] as const) : dice.pick(sizes);
    const upright = dice.chance(0.4);
    const portrait = !upright && dice.chance(0.4);
    const turn = upright ? dice.between(-15, 15) : dice.between(-180, 180);
    const quarter = dice.pick([90, -90]) + dice.between(-12, 12);
    const plan: ScenePlan = {
      target: dice.pick(['4x3', '3x2'] as const),
      width: portrait ? size[1] : size[0],
      height: portrait ? size[0] : size[1],
      // 60–100 % of the side of the frame that the target's height lies along.
      fill: dice.between(0.6, 1) * (portrait ? size[1] / size[0] : 1),
      rotationDegrees: portrait ? quarter : turn,
      tiltXDegrees: dice.between(-8, 8),
      tiltYDegrees: dice.between(-8, 8),
      distortionCornerPercent: dice.between(-8, 8),
      blurSigma: dice.between(0.45, 2.5),
      ...rendering(dice),
      redScalePermille: dice.between(-1, 1),
      blueScalePermille: dice.between(-1, 1),
      exposureEv: dice.between(-2, 1),
      lightTiltEv: dice.between(-0.3, 0.3),
      snrDb: dice.between(23, 40),
      format: jpeg(dice.between(85, 95), '4:2:0'),
    };
    return { plan, accept: ringsInFrame };
  },
  /** JPEG ≥ 92 4:4:4, SNR ≥ 34 dB, any tone contrast 0.8–1.4. */
  clean(dice) {
    const plan = {
      ...stand(dice),
      ...fringes(dice),
      ...rendering(dice),
      blurSigma: blur(dice),
      exposureEv: dice.between(-1, 0.5),
      snrDb: dice.between(34, 44),
      format: jpeg(dice.between(92, 98), '4:4:4'),
    };
    return { plan, accept: ringsInFrame };
  },
  /** SNR 23 dB. */
  noisy(dice) {
    const plan = {
      ...stand(dice),
      ...fringes(dice),
      ...rendering(dice),
      blurSigma: blur(dice),
      exposureEv: dice.between(-1, 0.5),
      snrDb: 23,
      format: jpeg(dice.between(92, 98), dice.pick(['4:4:4', '4:2:0'] as const)),
    };
    return { plan, accept: ringsInFrame };
  },
  /** JPEG 85 with 4:2:0. */
  subsampled(dice) {
    const plan = {
      ...stand(dice),
      ...fringes(dice),
      ...rendering(dice),
      blurSigma: blur(dice),
      exposureEv: dice.between(-1, 0.5),
      snrDb: dice.between(34, 44),
      format: jpeg(85, '4:2:0'),
    };
    return { plan, accept: ringsInFrame };
  },
  /** −2 to +1 EV, tone contrast 0.8–1.4, uneven light and shading. */
  exposure(dice) {
    const plan = {
      ...stand(dice),
      ...rendering(dice),
      blurSigma: dice.between(0.5, 1.2),
      lightTiltEv: dice.between(-0.2, 0.2),
      exposureEv: dice.between(-2, 1),
      snrDb: dice.between(28, 44),
      format: jpeg(dice.between(85, 98), dice.pick(['4:4:4', '4:2:0'] as const)),
    };
    return { plan, accept: ringsInFrame };
  },
  /** No disc clipped. */
  colour(dice) {
    const plan = {
      ...stand(dice),
      ...rendering(dice),
      blurSigma: dice.between(0.5, 1.2),
      saturation: dice.between(0.75, 1.05),
      toneContrast: dice.between(0.8, 1.25),
      exposureEv: dice.between(-1, 0.2),
      snrDb: dice.between(28, 44),
      format: jpeg(dice.between(85, 98), dice.pick(['4:4:4', '4:2:0'] as const)),
    };
    return { plan, accept: (drawn) => ringsInFrame(drawn) && unclipped(drawn) };
  },
  /** 20–40 dB, PNG. */
  noise(dice) {
    const plan: ScenePlan = {
      ...stand(dice),
      ...rendering(dice),
      blurSigma: dice.between(0.5, 1.2),
      exposureEv: dice.between(-1, 0.5),
      snrDb: dice.between(20, 40),
      format: { type: 'png' },
    };
    return { plan, accept: ringsInFrame };
  },
  /** Even light. */
  shading(dice) {
    const plan = {
      ...stand(dice),
      ...rendering(dice),
      shadingCornerEv: dice.between(-2, 0.2),
      blurSigma: dice.between(0.5, 1.2),
      exposureEv: dice.between(-1, 0.5),
      snrDb: dice.between(28, 44),
      format: jpeg(dice.between(85, 98), dice.pick(['4:4:4', '4:2:0'] as const)),
    };
    return { plan, accept: ringsInFrame };
  },
};
