import type { GroupResult, Metric, Warning } from '../result.ts';
import { median } from '../statistics/outliers.ts';
import { fitExposures, type GreyPoint } from './fit-exposures.ts';
import {
  clippedRung,
  type LadderShot,
  leftOut,
  muchClipping,
  overExposed,
  type PlacedShot,
  placeShots,
} from './ladder-shots.ts';
import { compareReciprocals } from './reciprocal.ts';

/** Lightest luminance, linear, that is compared: over it the curve's shoulder makes little of a lot of light. Our choice. */
const lightest = 0.85;
/** Darkest: code 10 of 255, below which a step of the code is a tenth of a stop. Our choice. */
const darkest = 0.003;
/** The frame counts as clipped when the greys up to the background's 18 % aren't all below clipping. */
const background = 0.18;
const fewestGreys = 4;
/** Stops of luminance in which two rungs must overlap to be compared. */
const leastOverlap = 0.5;
/** Residuals over this many times their uncertainty: the camera didn't keep to one curve. Our choice. */
const changedCurve = 4;

/**
 * Manual exposure ladder of the target, in steady light from a fixed stand.
 * - ladder.step, EV, zone: the rung (1/125, f/5.6 or both): light measured less light set, against the median rung; positive is more
 *   light than the settings say. Set light: exact series values behind the Exif labels (series.ts). Measured light: read through the
 *   target's greys in each frame (ISO 14524) by equal codes, never through a curve fitted to the exposure times; see
 *   fit-exposures.ts. Allowed 0.03 EV. Following the image-based comparison in the terms of ISO 516.
 * - ladder.worst, EV: the largest of them, without sign.
 * Which of two rungs is off can't be told from them alone; the median says that most are right. Rungs that clip, have no time in
 * their Exif or no code in common with the others are left out and named.
 */
export function measureLadder(shots: readonly LadderShot[]): GroupResult {
  const { placed, warnings } = placeShots(shots);
  const seen = placed.filter(({ greys }) => greys !== null);
  if (seen.length === 0) return compareReciprocals(placed, warnings);
  for (const { name, zone, greys, clippedHighlights } of placed) {
    if (greys !== null) continue;
    warnings.push(
      clippedHighlights > muchClipping
        ? clippedRung(name, zone, overExposed)
        : leftOut(name, zone, 'no target was found in it'),
    );
  }
  const usable = withoutClipped(seen, warnings);
  const chained = withoutApart(usable, warnings);
  const fit = chained.length > 1 ? fitExposures(chained.map(({ greys }) => greys)) : null;
  if (!fit) return { metrics: [], warnings: [...warnings, tooFew] };
  if (fit.excess > changedCurve) warnings.push(curveChanged);
  const errors = chained.map((shot, i) => fit.stops[i]! - shot.nominal);
  const covariance = (i: number, j: number) =>
    fit.covariance[i * chained.length + j]! + (i === j ? shadingDoubt(chained[i]!) ** 2 : 0);
  const rungs = groupRungs(chained.map(({ zone }) => zone));
  const metrics = stepMetrics(rungs, errors, covariance);
  return { metrics, warnings };
}

type SeenShot = PlacedShot & { greys: readonly GreyPoint[] };

function withoutClipped(shots: readonly PlacedShot[], warnings: Warning[]): SeenShot[] {
  return shots.flatMap((shot) => {
    const greys = shot.greys ?? [];
    const top = Math.max(0, ...greys.map(({ light }) => light));
    const used = greys.filter(({ luminance }) => luminance > darkest && luminance < lightest);
    if (top < background) {
      warnings.push(clippedRung(shot.name, shot.zone, overExposed));
      return [];
    }
    if (used.length < fewestGreys) {
      const dark = greys.filter(({ luminance }) => luminance <= darkest).length > greys.length / 2;
      warnings.push(
        dark
          ? clippedRung(shot.name, shot.zone, 'it is too dark to tell the greys apart')
          : leftOut(shot.name, shot.zone, 'too few greys can be used'),
      );
      return [];
    }
    return [{ ...shot, greys: used }];
  });
}

/** The largest chain of rungs in which each shares codes with the next. */
function withoutApart(shots: readonly SeenShot[], warnings: Warning[]): SeenShot[] {
  const ranges = shots
    .map((shot) => {
      const stops = shot.greys.map(({ luminance }) => Math.log2(luminance));
      return { shot, low: Math.min(...stops), high: Math.max(...stops) };
    })
    .sort((a, b) => a.low - b.low);
  const chains: SeenShot[][] = [];
  let reached = Number.NEGATIVE_INFINITY;
  for (const { shot, low, high } of ranges) {
    if (reached - low < leastOverlap) chains.push([]);
    chains.at(-1)!.push(shot);
    reached = Math.max(reached, high);
  }
  const largest = chains.reduce((best, chain) => (chain.length > best.length ? chain : best), []);
  for (const { name, zone } of shots.filter((shot) => !largest.includes(shot)))
    warnings.push(leftOut(name, zone, 'it has no codes in common with the other rungs'));
  return shots.filter((shot) => largest.includes(shot));
}

/**
 * The light at each grey is told by the shading of the background, and that through the tone curve: less surely where the background
 * comes out so light that under a stop is left above it. EV; found by rendering.
 */
function shadingDoubt({ greys }: SeenShot): number {
  const top = Math.max(...greys.map(({ light }) => light));
  return top < 2 * background ? 0.007 : 0.002;
}

/** Repeats of one setting are one rung. */
function groupRungs(zones: readonly string[]): Map<string, number[]> {
  const rungs = new Map<string, number[]>();
  zones.forEach((zone, i) => {
    rungs.set(zone, [...(rungs.get(zone) ?? []), i]);
  });
  return rungs;
}

function stepMetrics(
  rungs: ReadonlyMap<string, readonly number[]>,
  errors: readonly number[],
  covariance: (i: number, j: number) => number,
): Metric[] {
  const means = [...rungs].map(([zone, members]) => {
    const value = members.reduce((sum, i) => sum + errors[i]!, 0) / members.length;
    const stated = members.reduce(
      (sum, i) => sum + members.reduce((inner, j) => inner + covariance(i, j), 0),
      0,
    );
    const scatter = members.reduce((sum, i) => sum + (errors[i]! - value) ** 2, 0);
    const freedom = members.length * (members.length - 1);
    // JCGM 100 4.2: the repeats' scatter holds the shutter's own; the larger of the two stands.
    const variance = Math.max(stated / members.length ** 2, freedom > 0 ? scatter / freedom : 0);
    return { zone, value, variance };
  });
  const middle = median(means.map(({ value }) => value));
  const shared = means.reduce((sum, { variance }) => sum + variance, 0) / means.length ** 2;
  const steps = means.map(({ zone, value, variance }): Metric => {
    // The median of n varies by π/2 as much as their mean (normal errors).
    const uncertainty = Math.sqrt(variance + (Math.PI / 2) * shared);
    return { name: 'ladder.step', zone, value: value - middle, unit: 'EV', uncertainty };
  });
  const worst = steps.reduce((a, b) => (Math.abs(b.value) > Math.abs(a.value) ? b : a));
  const { uncertainty } = worst;
  const largest = { name: 'ladder.worst', value: Math.abs(worst.value), unit: 'EV', uncertainty };
  return [...steps, largest];
}

const tooFew: Warning = {
  code: 'ladder-too-short',
  message:
    'Fewer than two rungs can be compared. Photograph the target at three settings or more, a stop or two apart.',
};
const curveChanged: Warning = {
  code: 'ladder-curve-changed',
  message:
    'The greys do not fit one tone curve, so the camera changed its rendering between the rungs or the light changed. Switch off automatic contrast and use steady light.',
};
