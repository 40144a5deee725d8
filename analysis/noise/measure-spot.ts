import type { Frame, Point } from '../image.ts';
import { solveSpd } from '../numeric/spd.ts';

/** A plain spot, in luminance of the file's linear light. */
export interface Spot {
  readonly mean: number;
  /** About a quadratic surface, less what rounding to codes adds where that can be told. */
  readonly variance: number;
  /** Share of `variance` that may be rounding's instead of the camera's. */
  readonly roundingShare: number;
  /** Independent pixels behind the variance, less the surface's unknowns. */
  readonly freedom: number;
}

const weights = [0.2126, 0.7152, 0.0722] as const;
const unknowns = 6;
const fewestPixels = 60;
/** Largest radius that is read, px: more pixels make the figure no better than its own systematic part. */
const enough = 32;

/** @returns null when the spot leaves the frame, is clipped, or has fewer than 60 pixels */
export function measureSpot(frame: Frame, at: Point, radius: number): Spot | null {
  const size = Math.min(radius, enough);
  const left = Math.ceil(at.x - size);
  const top = Math.ceil(at.y - size);
  const side = Math.floor(2 * size);
  if (left < 0 || top < 0 || left + side > frame.width || top + side > frame.height) return null;
  const read = readLuminance(frame, left, top, side);
  if (!read) return null;
  const { luminance, rounding } = read;
  const inside = new Uint8Array(side * side);
  let count = 0;
  for (let row = 0; row < side; row++) {
    const y = top + row + 0.5 - at.y;
    for (let col = 0; col < side; col++) {
      const x = left + col + 0.5 - at.x;
      if (x * x + y * y > size * size) continue;
      inside[row * side + col] = 1;
      count++;
    }
  }
  if (count < fewestPixels) return null;
  const mean = subtractSurface(luminance, inside, side);
  if (mean === null) return null;
  let squares = 0;
  for (let i = 0; i < inside.length; i++) if (inside[i]) squares += luminance[i]! ** 2;
  const found = squares / (count - unknowns);
  if (!(found > 0)) return null;
  const independent = count / clumping(luminance, inside, side, found);
  return {
    mean,
    ...withoutRounding(found, rounding),
    freedom: Math.max(2, independent - unknowns),
  };
}

/** Noise below which its rounding errors depend on where in a code the mean lies, codes squared. */
const leastDithered = 0.4 ** 2;

/**
 * Rounding to codes adds a twelfth of a squared code to each channel's variance as long as the noise itself spans the codes
 * (Sheppard's correction; from memory, after Widrow & Kollár, Quantization Noise, 2008). Below that the whole is kept: noise is
 * then at most that.
 * @param rounding  variance of luminance that a twelfth of a squared code in each channel makes
 */
function withoutRounding(
  found: number,
  rounding: number,
): Pick<Spot, 'variance' | 'roundingShare'> {
  const codesSquared = (found / rounding - 1) / 12;
  if (codesSquared >= leastDithered) return { variance: found - rounding, roundingShare: 0 };
  return { variance: found, roundingShare: Math.min(1, rounding / found) };
}

/** Luminance of a square of pixels and the variance of its rounding, or null when any pixel is at an end of the scale. */
function readLuminance(
  frame: Frame,
  left: number,
  top: number,
  side: number,
): { luminance: Float64Array; rounding: number } | null {
  const { data, width, maxCode, toLinear, toSrgb } = frame;
  const [red, green, blue] = toLinear;
  const [wr, wg, wb] = luminanceWeights(toSrgb);
  const low = maxCode / 255;
  const high = maxCode - low;
  const luminance = new Float64Array(side * side);
  let steps = 0;
  for (let row = 0; row < side; row++) {
    let at = ((top + row) * width + left) * 3;
    for (let col = 0; col < side; col++, at += 3) {
      const r = data[at]!;
      const g = data[at + 1]!;
      const b = data[at + 2]!;
      if (Math.min(r, g, b) <= low || Math.max(r, g, b) >= high) return null;
      luminance[row * side + col] = wr * red[r]! + wg * green[g]! + wb * blue[b]!;
      // Half the light between the neighbouring codes is one code's.
      steps += (wr * (red[r + 1]! - red[r - 1]!)) ** 2;
      steps += (wg * (green[g + 1]! - green[g - 1]!)) ** 2;
      steps += (wb * (blue[b + 1]! - blue[b - 1]!)) ** 2;
    }
  }
  return { luminance, rounding: steps / 4 / 12 / luminance.length };
}

/** Luminance from the file's own primaries. */
export function luminanceWeights(toSrgb: readonly number[] | null): [number, number, number] {
  const at = (c: number) =>
    toSrgb ? weights.reduce((sum, w, row) => sum + w * toSrgb[row * 3 + c]!, 0) : weights[c]!;
  return [at(0), at(1), at(2)];
}

/** Powers of x and of y in the surface's six terms: 1, x, y, x², xy, y². */
const powersX = [0, 1, 0, 2, 1, 0] as const;
const powersY = [0, 0, 1, 0, 1, 2] as const;
/** Powers 0 … 4 occur in their products. */
const powers = 5;

/** Takes a quadratic surface from the pixels inside; returns their mean. */
function subtractSurface(plane: Float64Array, inside: Uint8Array, side: number): number | null {
  const scale = 2 / side;
  const moments = new Float64Array(powers * powers);
  const right = new Float64Array(unknowns);
  for (let row = 0; row < side; row++)
    addRow(plane, inside, row * side, side, row * scale - 1, { moments, right });
  const normal = new Float64Array(unknowns * unknowns);
  for (let j = 0; j < unknowns; j++)
    for (let k = 0; k <= j; k++)
      normal[j * unknowns + k] =
        moments[(powersY[j]! + powersY[k]!) * powers + powersX[j]! + powersX[k]!]!;
  const count = moments[0]!;
  const sum = right[0]!;
  if (!solveSpd(normal, right)) return null;
  const [c0, cx, cy, cxx, cxy, cyy] = right;
  for (let row = 0; row < side; row++) {
    const y = row * scale - 1;
    const level = c0! + (cy! + cyy! * y) * y;
    const slope = cx! + cxy! * y;
    const bend = cxx!;
    for (let i = row * side, col = 0; col < side; col++, i++) {
      const x = col * scale - 1;
      plane[i]! -= level + (slope + bend * x) * x;
    }
  }
  return sum / count;
}

/** Adds a row's sums: y is the same along it, so that powers of x are enough for all six terms. */
function addRow(
  plane: Float64Array,
  inside: Uint8Array,
  start: number,
  side: number,
  y: number,
  { moments, right }: { moments: Float64Array; right: Float64Array },
): void {
  const scale = 2 / side;
  let n = 0;
  let x1 = 0;
  let x2 = 0;
  let x3 = 0;
  let x4 = 0;
  let v = 0;
  let vx = 0;
  let vxx = 0;
  for (let col = 0; col < side; col++) {
    if (!inside[start + col]) continue;
    const x = col * scale - 1;
    const xx = x * x;
    const value = plane[start + col]!;
    n++;
    x1 += x;
    x2 += xx;
    x3 += xx * x;
    x4 += xx * xx;
    v += value;
    vx += value * x;
    vxx += value * xx;
  }
  for (let q = 0, power = 1; q < powers; q++, power *= y) {
    const at = q * powers;
    moments[at]! += power * n;
    moments[at + 1]! += power * x1;
    moments[at + 2]! += power * x2;
    moments[at + 3]! += power * x3;
    moments[at + 4]! += power * x4;
  }
  right[0]! += v;
  right[1]! += vx;
  right[2]! += v * y;
  right[3]! += vxx;
  right[4]! += vx * y;
  right[5]! += v * y * y;
}

const lags = 4;

/**
 * Pixels that count as one because their noise is alike (denoising, JPEG): 1 + Σ ρ² over the lags about a pixel, ρ the
 * autocorrelation. It is the square that matters for a variance.
 */
function clumping(plane: Float64Array, inside: Uint8Array, side: number, variance: number): number {
  let sum = 1;
  for (let dy = 0; dy <= lags; dy++)
    for (let dx = dy === 0 ? 1 : -lags; dx <= lags; dx++) {
      const { product, pairs } = lagProduct(plane, inside, side, dy * side + dx, dx);
      if (pairs < 30) continue;
      const rho = product / pairs / variance;
      sum += 2 * Math.max(0, rho * rho - 1 / pairs);
    }
  return sum;
}

function lagProduct(
  plane: Float64Array,
  inside: Uint8Array,
  side: number,
  offset: number,
  dx: number,
): { product: number; pairs: number } {
  let product = 0;
  let pairs = 0;
  // Every third row says enough of the correlation.
  for (let row = 0; row * side + offset < plane.length; row += 3)
    for (let col = Math.max(0, -dx); col < side - Math.max(0, dx); col++) {
      const i = row * side + col;
      const j = i + offset;
      if (j >= plane.length || !inside[i] || !inside[j]) continue;
      product += plane[i]! * plane[j]!;
      pairs++;
    }
  return { product, pairs };
}
