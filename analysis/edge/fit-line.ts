import { fastNormalCdf } from '../numeric/normal.ts';
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
const gradient = new Float64Array(parameters);

/**
 * Finds the edge in the samples by Gauss–Newton on every pixel near it.
 * @param shape  a fit whose tilt and bend are kept (red and blue follow green's line); absent: all six are free
 * @returns null when the pixels show no rising step
 */
export function fitLine(samples: Samples, channel: 0 | 1 | 2, shape?: LineFit): LineFit | null {
  const light = samples.light[channel];
  const fit = shape ? { ...shape } : startingFit(samples, light);
  if (!fit || !levels(samples, light, fit)) return null;
  for (let iteration = 0; iteration < 12; iteration++) {
    const change = improve(samples, light, fit, shape === undefined);
    if (change === null) return null;
    if (change < 0.002) return fit;
  }
  return fit;
}

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
): number | null {
  const { distance, along, count } = samples;
  const { low, step, sigma, shift, tilt, bend } = fit;
  const near = 4 * sigma + 2.5;
  const density = 1 / Math.sqrt(2 * Math.PI);
  normal.fill(0);
  right.fill(0);
  let squares = 0;
  let used = 0;
  gradient[0] = 1;
  for (let i = 0; i < count; i++) {
    const t = along[i]!;
    const d = distance[i]! - shift - (tilt + bend * t) * t;
    if (d > near || d < -near) continue;
    const z = d / sigma;
    const rise = fastNormalCdf(z);
    const slope = (-step / sigma) * density * Math.exp(-0.5 * z * z);
    const error = light[i]! - low - step * rise;
    squares += error * error;
    used++;
    gradient[1] = rise;
    gradient[2] = slope * z;
    gradient[3] = slope;
    gradient[4] = freeShape ? slope * t : 0;
    gradient[5] = freeShape ? slope * t * t : 0;
    for (let j = 0; j < parameters; j++) {
      const g = gradient[j]!;
      right[j]! += g * error;
      for (let k = 0; k <= j; k++) normal[j * parameters + k]! += g * gradient[k]!;
    }
  }
  if (used < 24) return null;
  fit.residual = Math.sqrt(squares / Math.max(1, used - parameters));
  steady(used, step, freeShape);
  if (!solveSpd(normal, right)) return null;
  fit.shiftUncertainty = fit.residual * Math.sqrt(normal[3 * parameters + 3]!);
  return advance(fit);
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
