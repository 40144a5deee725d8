import { analyseBytes } from '../../analysis/analyse-bytes.ts';
import type { TonePoint } from '../../analysis/exposure/lent-tone.ts';
import type { Analysis } from '../../analysis/result.ts';
import { renderDark, renderFlat, renderGrey } from '../../fixtures/scene/flat.ts';
import { createTone, encodeSrgb } from '../../fixtures/scene/light.ts';
import type { FormatPlan } from '../../fixtures/scene/plan.ts';
import type { QuantityName } from './rows.ts';
import type { Sample } from './samples.ts';
import { type Dice, diceOf, type PlainSuite } from './suites.ts';

interface PlainResult {
  plan: object;
  samples: Sample[];
}

/** Renders and measures one seeded photograph without a target. */
export function runPlain(suite: PlainSuite, seed: number): Promise<PlainResult> {
  return runs[suite](diceOf(suite, seed), seed);
}

const runs: Record<PlainSuite, (dice: Dice, seed: number) => Promise<PlainResult>> = {
  'lens cap': runDark,
  dust: runDust,
  card: runCard,
  'flat field': runFlat,
};

const size = { width: 1200, height: 900 };
const greys = [0.03, 0.05, 0.08, 0.12, 0.18, 0.25, 0.34, 0.45, 0.6, 0.75];

/** Places at least `apart` from one another. */
function scatter<T extends { x: number; y: number }>(
  count: number,
  draw: () => T,
  apart: (a: T, b: T) => number,
): T[] {
  const placed: T[] = [];
  while (placed.length < count) {
    const next = draw();
    const clear = placed.every((p) => Math.hypot(p.x - next.x, p.y - next.y) > apart(p, next));
    if (clear) placed.push(next);
  }
  return placed;
}

/** Lossless, so that 6 σ of the camera's noise are 6 σ in the file. */
async function runDark(dice: Dice, seed: number): Promise<PlainResult> {
  const noise = dice.between(0.4, 4);
  const level = dice.between(0, 4) * noise;
  const banding = dice.chance(0.5) ? dice.between(0, 0.5) * noise : 0;
  const draw = () => ({
    x: Math.floor(dice.between(0, size.width)),
    y: Math.floor(dice.between(0, size.height)),
    // A hot pixel is planted as a code, whatever its row's own offset: that much higher it stands out of any row by 6 σ.
    code: Math.ceil(level + 3.5 * banding + Math.max(6 * noise, 2) * dice.between(1, 3)),
  });
  const hot = scatter(15, draw, () => 10);
  const plan = { ...size, level, noise, banding, hot, seed, format: { type: 'png' } as const };
  const analysis = await analyseBytes(await renderDark(plan), { kind: 'dark' });
  return { plan, samples: [countSample('dark.hot', analysis, hot, () => 2)] };
}

async function runDust(dice: Dice, seed: number): Promise<PlainResult> {
  const snrDb = dice.between(28, 42);
  const noise = 10 ** (-snrDb / 20);
  const draw = () => ({
    x: dice.between(0, size.width),
    y: dice.between(0, size.height),
    sigma: 1.5 + 23 * dice.between(0, 1) ** 2,
    depth: Math.min(0.8, Math.max(0.04, 6 * noise * dice.between(1, 3))),
  });
  const dust = scatter(8, draw, (a, b) => 4 * (a.sigma + b.sigma));
  const plan = { ...flatPlan(dice), snrDb, dust, seed };
  const { bytes } = await renderFlat(plan);
  const analysis = await analyseBytes(bytes, { kind: 'flat' });
  const sample = countSample('dust.count', analysis, dust, ({ sigma }) => Math.max(4, 1.5 * sigma));
  return { plan, samples: [sample] };
}

async function runCard(dice: Dice, seed: number): Promise<PlainResult> {
  const toneContrast = dice.between(0.8, 1.4);
  const plan = {
    ...flatPlan(dice),
    toneContrast,
    exposureEv: dice.between(-1.5, 1),
    fill: dice.between(0.6, 1),
    seed,
  };
  const { bytes, truth } = await renderGrey(plan);
  const analysis = await analyseBytes(bytes, { kind: 'grey', tone: lend(dice, toneContrast) });
  return { plan, samples: [valueSample('exposure.bias', analysis, truth.exposureBias)] };
}

async function runFlat(dice: Dice, seed: number): Promise<PlainResult> {
  const toneContrast = dice.between(0.8, 1.4);
  const plan = {
    ...flatPlan(dice),
    toneContrast,
    exposureEv: dice.between(-0.5, 0.5),
    shadingCornerEv: dice.between(-2, 0.2),
    seed,
  };
  const { bytes, truth } = await renderFlat(plan);
  const analysis = await analyseBytes(bytes, { kind: 'flat', tone: lend(dice, toneContrast) });
  return { plan, samples: [valueSample('shading.corner', analysis, truth.shadingCorner)] };
}

function flatPlan(dice: Dice) {
  const subsampling = dice.pick(['4:4:4', '4:2:0'] as const);
  const jpeg = { type: 'jpeg', quality: Math.round(dice.between(92, 98)), subsampling } as const;
  return {
    ...size,
    snrDb: dice.between(28, 42),
    shadingCornerEv: dice.between(-1.5, 0),
    lightTiltEv: dice.between(-0.2, 0.2),
    format: dice.pick<FormatPlan>([jpeg, { type: 'png' }]),
  };
}

/** What a run's target shot lends: its greys' codes, each as uncertain as a real shot's, at its own exposure. */
function lend(dice: Dice, contrast: number): TonePoint[] {
  const tone = createTone(contrast);
  const gain = 2 ** dice.between(-0.5, 0.3);
  return greys.map((reflectance) => ({
    reflectance,
    code: encodeSrgb(tone.apply(reflectance * gain * 2 ** dice.between(-0.01, 0.01))),
  }));
}

/** Error: defects missed and defects invented together; a count that is right by chance is none. */
function countSample<T extends { x: number; y: number }>(
  quantity: QuantityName,
  analysis: Analysis,
  planted: readonly T[],
  reach: (defect: T) => number,
): Sample {
  const spots = analysis.plots.spots ?? [];
  const near = (defect: T, spot: { x: number; y: number }) =>
    Math.hypot(defect.x - spot.x, defect.y - spot.y) < reach(defect);
  const missed = planted.filter((defect) => !spots.some((spot) => near(defect, spot))).length;
  const invented = spots.filter((spot) => !planted.some((defect) => near(defect, spot))).length;
  const where = `missed ${missed}, invented ${invented}`;
  const { uncertainty = null } = analysis.metrics.find((m) => m.name === quantity) ?? {};
  return { quantity, where, truth: planted.length, error: missed + invented, uncertainty };
}

function valueSample(quantity: QuantityName, analysis: Analysis, truth: number): Sample {
  const metric = analysis.metrics.find((m) => m.name === quantity && !m.zone);
  if (!metric)
    return { quantity, where: '', truth, error: Number.POSITIVE_INFINITY, uncertainty: null };
  const { value, uncertainty } = metric;
  return { quantity, where: '', truth, error: value - truth, uncertainty };
}
