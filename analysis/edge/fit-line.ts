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

const parameters = 6;
const normal = new Float64Array(parameters * parameters);
const right = new Float64Array(parameters);

/**
 * Finds the edge in the samples by Gauss–Newton on every pixel near it.
 * @param shape  a fit whose tilt and bend are kept (red and blue follow green's line); absent: all six are free
 * @returns null when the pixels show no rising step
 */
export function fitLine(samples: Samples, channel: 0 | 1 | 2, shape?: LineFit): LineFit | null {
  const light = samples.light[channel];
  const fit = shape ? { ...shape } : startingFit(samples, light);
  if (!fit || !levels(samples, light, fit)) return null;
  const free = shape === undefined;
  // Most of the way on a thinned set of pixels, the last steps on all of them.
  for (const stride of [Math.max(1, Math.floor(samples.count / thinned)), 1]) {
    for (let iteration = 0; iteration < 8; iteration++) {
      const change = improve(samples, light, fit, free, stride);
      if (change === null) return null;
      if (change < (stride > 1 ? 0.02 : 0.004)) break;
    }
    if (stride === 1) return fit;
  }
  return fit;
}

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

/** One Gauss–Newton step; returns the largest move in px, or null when the step is lost. */
function improve(
  samples: Samples,
  light: Float32Array,
  fit: LineFit,
  freeShape: boolean,
  stride: number,
): number | null {
  const { distance, along, count } = samples;
  const { low, step, sigma, shift, tilt, bend } = fit;
  const near = 4 * sigma + 2.5;
  normal.fill(0);
  right.fill(0);
  const perSigma = 1 / sigma;
  const scale = -step * perSigma;
  let squares = 0;
  let used = 0;
  let [sg, sgg, sgw, sgs, sww, sws, sss] = [0, 0, 0, 0, 0, 0, 0];
  let [sw, ss, e0, e1, e2, e3] = [0, 0, 0, 0, 0, 0];
  for (let i = 0; i < count; i += stride) {
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
    if (freeShape && slope !== 0) addShape(t, rise, widen, slope, error);
  }
  normal.set([used], 0);
  normal.set([sg, sgg], parameters);
  normal.set([sw, sgw, sww], 2 * parameters);
  normal.set([ss, sgs, sws, sss], 3 * parameters);
  right.set([e0, e1, e2, e3]);
  if (used < 24) return null;
  fit.residual = Math.sqrt(squares / Math.max(1, used - parameters));
  steady(used, step, freeShape);
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
function steady(used: number, step: number, freeShape: boolean): void {
  const weak = 1e-5 * used * step * step;
  normal[2 * parameters + 2]! += weak;
  for (const j of [4, 5]) normal[j * parameters + j]! += freeShape ? weak : 1;
}

function advance(fit: LineFit): number | null {
  const limit = (value: number, most: number) => Math.min(most, Math.max(-most, value));
  fit.low += right[0]!;
  fit.step += right[1]!;
  const widen = limit(right[2]!, 0.6 * fit.sigma);
  fit.sigma = Math.min(6, Math.max(0.15, fit.sigma + widen));
  const move = limit(right[3]!, 1.5);
  const turn = limit(right[4]!, 1.5);
  const curve = limit(right[5]!, 1.5);
  fit.shift += move;
  fit.tilt += turn;
  fit.bend += curve;
  if (!(fit.step > 0)) return null;
  return Math.max(Math.abs(widen), Math.abs(move), Math.abs(turn), Math.abs(curve));
}
