import { fastNormalCdf, fastNormalDensity } from '../numeric/normal.ts';
import { solveSpd } from '../numeric/spd.ts';
import type { Samples } from './collect-samples.ts';

/** A blurred step, low + step · Φ((d − shift(t)) / sigma), as it lies in the samples of one channel. */
export interface LineFit {
  low: number;
  step: number;
  /** px, along the normal. */
  sigma: number;
  /** shift(t) = shift + tilt · t + bend · t², px, t = −1 … 1 along the edge. */
  shift: number;
  tilt: number;
  bend: number;
  /** Standard deviation of the residuals, same unit as the light. */
  residual: number;
  /** Standard uncertainty of `shift` if the residuals are independent, px. */
  shiftUncertainty: number;
}

/** Of a whole fit; one that follows another's line has them too. */
export const parameters = 6;
const normal = new Float64Array(parameters * parameters);
const right = new Float64Array(parameters);

/** The samples that are looked at: the first `chosenCount` entries are their indices. */
let chosen = new Int32Array(0);
let chosenCount = 0;
/** How far the fit may move before the samples near it are chosen anew, px. */
const slack = 1;
/** A step that moves no parameter by more than 1 px moves the borders of what is near by at most so much: 4 σ, shift, tilt, bend. */
const mostReach = 7;

/**
 * Finds the edge in the green samples by Gauss–Newton on every pixel near it; fit-bins.ts finds the other channels' along its line.
 * @returns null when the pixels show no rising step
 */
export function fitLine(samples: Samples): LineFit | null {
  const light = samples.light[1];
  const fit = startingFit(samples, light);
  if (!fit || !levels(samples, light, fit)) return null;
  // Most of the way on a thinned set of pixels, the last steps on all of them.
  if (chosen.length < samples.count) chosen = new Int32Array(samples.distance.length);
  const stride = Math.floor(samples.count / thinned);
  if (stride > 1) {
    chooseEvery(stride, samples);
    for (let iteration = 0; iteration < 8; iteration++) {
      const change = improve(samples, light, fit);
      if (change === null) return null;
      if (change < 0.02) break;
    }
  }
  let moved = Number.POSITIVE_INFINITY;
  for (let iteration = 0; iteration < 8; iteration++) {
    if (moved > slack) {
      chooseNear(samples, fit);
      moved = 0;
    }
    const change = improve(samples, light, fit);
    if (change === null) return null;
    if (change < settled) break;
    moved += mostReach * change;
  }
  return fit;
}

/** A step below this is the last, px. */
export const settled = 0.004;

/** Pixels that are enough to come near. */
const thinned = 900;

function startingFit(samples: Samples, light: Float32Array): LineFit | null {
  const fit = {
    low: 0,
    step: 0,
    sigma: 1,
    shift: 0,
    tilt: 0,
    bend: 0,
    residual: 0,
    shiftUncertainty: 0,
  };
  return levels(samples, light, fit) ? fit : null;
}

/** Levels either side, from pixels well away from the edge. */
function levels(samples: Samples, light: Float32Array, fit: LineFit): boolean {
  const { distance, count } = samples;
  const clear = 2.2 * fit.sigma;
  let lowSum = 0;
  let lowCount = 0;
  let highSum = 0;
  let highCount = 0;
  for (let i = 0; i < count; i++) {
    const d = distance[i]! - fit.shift;
    if (d < -clear) {
      lowSum += light[i]!;
      lowCount++;
    } else if (d > clear) {
      highSum += light[i]!;
      highCount++;
    }
  }
  if (lowCount < 8 || highCount < 8) return false;
  fit.low = lowSum / lowCount;
  fit.step = highSum / highCount - fit.low;
  return fit.step > 0;
}

function chooseEvery(stride: number, { count }: Samples): void {
  chosenCount = 0;
  for (let i = 0; i < count; i += stride) chosen[chosenCount++] = i;
}

function chooseNear({ distance, along, count }: Samples, fit: LineFit): void {
  const { shift, tilt, bend } = fit;
  const near = nearOf(fit) + slack;
  chosenCount = 0;
  for (let i = 0; i < count; i++) {
    const t = along[i]!;
    const d = distance[i]! - shift - (tilt + bend * t) * t;
    if (d <= near && d >= -near) chosen[chosenCount++] = i;
  }
}

/** Pixels farther away say nothing of where the edge lies, and little of its levels. px. */
export function nearOf({ sigma }: LineFit): number {
  return 4 * sigma + 2.5;
}

/** One Gauss–Newton step on the chosen samples; returns the largest move in px, or null when the step is lost. */
function improve(samples: Samples, light: Float32Array, fit: LineFit): number | null {
  const { distance, along } = samples;
  const { low, step, sigma, shift, tilt, bend } = fit;
  const near = nearOf(fit);
  const perSigma = 1 / sigma;
  const scale = -step * perSigma;
  const count = chosenCount;
  normal.fill(0);
  right.fill(0);
  let used = 0;
  // Each begins as a number of its own: taken out of one array, they would live on the heap and the loop be three times as slow.
  let squares = 0;
  let sg = 0;
  let sgg = 0;
  let sgw = 0;
  let sgs = 0;
  let sww = 0;
  let sws = 0;
  let sss = 0;
  let sw = 0;
  let ss = 0;
  let e0 = 0;
  let e1 = 0;
  let e2 = 0;
  let e3 = 0;
  for (let k = 0; k < count; k++) {
    const i = chosen[k]!;
    const t = along[i]!;
    const d = distance[i]! - shift - (tilt + bend * t) * t;
    if (d > near || d < -near) continue;
    const z = d * perSigma;
    const rise = fastNormalCdf(z);
    const slope = scale * fastNormalDensity(z);
    const widen = slope * z;
    const error = light[i]! - low - step * rise;
    squares += error * error;
    used++;
    sg += rise;
    sw += widen;
    ss += slope;
    sgg += rise * rise;
    sgw += rise * widen;
    sgs += rise * slope;
    sww += widen * widen;
    sws += widen * slope;
    sss += slope * slope;
    e0 += error;
    e1 += rise * error;
    e2 += widen * error;
    e3 += slope * error;
    if (slope !== 0) addShape(t, rise, widen, slope, error);
  }
  normal[0] = used;
  normal[6] = sg;
  normal[7] = sgg;
  normal[12] = sw;
  normal[13] = sgw;
  normal[14] = sww;
  normal[18] = ss;
  normal[19] = sgs;
  normal[20] = sws;
  normal[21] = sss;
  right[0] = e0;
  right[1] = e1;
  right[2] = e2;
  right[3] = e3;
  if (used < fewestUsed) return null;
  fit.residual = Math.sqrt(squares / Math.max(1, used - parameters));
  steady(used, step);
  if (!solveSpd(normal, right)) return null;
  fit.shiftUncertainty = fit.residual * Math.sqrt(normal[3 * parameters + 3]!);
  return advance(fit);
}

/** The rows of tilt (4) and bend (5). */
function addShape(t: number, rise: number, widen: number, slope: number, error: number): void {
  const tilt = slope * t;
  const bend = tilt * t;
  const n = normal;
  n[24]! += tilt;
  n[25]! += tilt * rise;
  n[26]! += tilt * widen;
  n[27]! += tilt * slope;
  n[28]! += tilt * tilt;
  n[30]! += bend;
  n[31]! += bend * rise;
  n[32]! += bend * widen;
  n[33]! += bend * slope;
  n[34]! += bend * tilt;
  n[35]! += bend * bend;
  right[4]! += tilt * error;
  right[5]! += bend * error;
}

/** Weak pulls that keep a short or noisy edge from running away, far below the weight of a usable one. */
function steady(used: number, step: number): void {
  const weak = weakPull * used * step * step;
  for (const j of [2, 4, 5]) normal[j * parameters + j]! += weak;
}

export const weakPull = 1e-5;
/** Pixels near the edge below which no step is told. */
export const fewestUsed = 24;

function advance(fit: LineFit): number | null {
  const moved = moveStep(fit, right);
  const turn = limit(right[4]!, 1.5);
  const curve = limit(right[5]!, 1.5);
  fit.tilt += turn;
  fit.bend += curve;
  return moved === null ? null : Math.max(moved, Math.abs(turn), Math.abs(curve));
}

/** Moves low, step, sigma and shift by the first four of a solution; returns the largest move in px, or null when the step is lost. */
export function moveStep(fit: LineFit, solution: Float64Array): number | null {
  fit.low += solution[0]!;
  fit.step += solution[1]!;
  const widen = limit(solution[2]!, 0.6 * fit.sigma);
  fit.sigma = Math.min(6, Math.max(0.15, fit.sigma + widen));
  const move = limit(solution[3]!, 1.5);
  fit.shift += move;
  return fit.step > 0 ? Math.max(Math.abs(widen), Math.abs(move)) : null;
}

function limit(value: number, most: number): number {
  return Math.min(most, Math.max(-most, value));
}
