import { fastNormalCdf, fastNormalDensity } from '../numeric/normal.ts';
import { solveSpd } from '../numeric/spd.ts';
import { type Bins, lightAt, width } from './bin-samples.ts';
import {
  fewestUsed,
  type LineFit,
  moveStep,
  nearOf,
  parameters,
  settled,
  weakPull,
} from './fit-line.ts';

const unknowns = 4;
const normal = new Float64Array(unknowns * unknowns);
const right = new Float64Array(unknowns);

/**
 * Finds a channel's step along green's line, by Gauss–Newton on the bins' means: across 1/32 px the step is straight, so that they
 * tell what the pixels do.
 * @param line  green's fit, whose tilt and bend are kept and which is the start
 * @returns null when the bins show no rising step
 */
export function fitBins(bins: Bins, channel: 0 | 2 | 3, line: LineFit): LineFit | null {
  const fit = { ...line };
  const light = lightAt(channel);
  if (!setLevels(bins, light, fit, line.shift)) return null;
  for (let iteration = 0; iteration < 8; iteration++) {
    const change = improve(bins, light, fit, line.shift);
    if (change === null) return null;
    if (change < settled) break;
  }
  return fit;
}

/** Levels either side, from bins well away from the edge. @param origin  the bins' line, px */
function setLevels({ count, sums }: Bins, light: number, fit: LineFit, origin: number): boolean {
  const clear = 2.2 * fit.sigma;
  let lowSum = 0;
  let lowCount = 0;
  let highSum = 0;
  let highCount = 0;
  for (let at = 0; at < count * width; at += width) {
    const n = sums[at]!;
    const d = sums[at + 1]! / n + origin - fit.shift;
    if (d < -clear) {
      lowSum += sums[at + light]!;
      lowCount += n;
    } else if (d > clear) {
      highSum += sums[at + light]!;
      highCount += n;
    }
  }
  if (lowCount < 8 || highCount < 8) return false;
  fit.low = lowSum / lowCount;
  fit.step = highSum / highCount - fit.low;
  return fit.step > 0;
}

/** One Gauss–Newton step; returns the largest move in px, or null when the step is lost. */
function improve(
  { count, sums }: Bins,
  light: number,
  fit: LineFit,
  origin: number,
): number | null {
  const { low, step, sigma, shift } = fit;
  const near = nearOf(fit);
  normal.fill(0);
  right.fill(0);
  let used = 0;
  let squares = 0;
  for (let at = 0; at < count * width; at += width) {
    const n = sums[at]!;
    const middle = sums[at + 1]! / n;
    const d = middle + origin - shift;
    // An empty bin has no middle.
    if (!(d <= near && d >= -near)) continue;
    const z = d / sigma;
    const rise = fastNormalCdf(z);
    const slope = (-step / sigma) * fastNormalDensity(z);
    const mean = sums[at + light]! / n;
    const error = mean - low - step * rise;
    // About the bin's mean the pixels scatter by noise, and by as much as the step rises across the bin.
    const scatter = sums[at + light + 1]! - n * mean * mean;
    const risen = slope * slope * (sums[at + 2]! - n * middle * middle);
    squares += n * error * error + Math.max(0, scatter - risen);
    used += n;
    addRow(n, rise, slope * z, slope, error);
  }
  if (used < fewestUsed) return null;
  fit.residual = Math.sqrt(squares / Math.max(1, used - parameters));
  normal[10]! += weakPull * used * step * step;
  if (!solveSpd(normal, right)) return null;
  fit.shiftUncertainty = fit.residual * Math.sqrt(normal[15]!);
  return moveStep(fit, right);
}

/** Lower triangle: level, step, blur, shift. */
function addRow(n: number, rise: number, widen: number, slope: number, error: number): void {
  normal[0]! += n;
  normal[4]! += n * rise;
  normal[5]! += n * rise * rise;
  normal[8]! += n * widen;
  normal[9]! += n * widen * rise;
  normal[10]! += n * widen * widen;
  normal[12]! += n * slope;
  normal[13]! += n * slope * rise;
  normal[14]! += n * slope * widen;
  normal[15]! += n * slope * slope;
  right[0]! += n * error;
  right[1]! += n * rise * error;
  right[2]! += n * widen * error;
  right[3]! += n * slope * error;
}
