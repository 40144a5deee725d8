import type { Frame, Point } from '../image.ts';
import { solveSpd } from '../numeric/spd.ts';

/** A plain spot, in luminance of the file's linear light. */
export interface Spot {
  readonly mean: number;
  /** About a quadratic surface. */
  readonly variance: number;
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
  const luminance = readLuminance(frame, left, top, side);
  if (!luminance) return null;
  const inside = new Uint8Array(side * side);
  let count = 0;
  for (let i = 0; i < inside.length; i++) {
    const x = left + (i % side) + 0.5 - at.x;
    const y = top + Math.floor(i / side) + 0.5 - at.y;
    if (x * x + y * y > size * size) continue;
    inside[i] = 1;
    count++;
  }
  if (count < fewestPixels) return null;
  const mean = subtractSurface(luminance, inside, side);
  if (mean === null) return null;
  let squares = 0;
  for (let i = 0; i < inside.length; i++) if (inside[i]) squares += luminance[i]! ** 2;
  const variance = squares / (count - unknowns);
  if (!(variance > 0)) return null;
  const independent = count / clumping(luminance, inside, side, variance);
  return { mean, variance, freedom: Math.max(2, independent - unknowns) };
}

/** Luminance of a square of pixels, or null when any of them is at an end of the scale. */
function readLuminance(frame: Frame, left: number, top: number, side: number): Float64Array | null {
  const { data, width, maxCode, toLinear, toSrgb } = frame;
  const [red, green, blue] = toLinear;
  const [wr, wg, wb] = luminanceWeights(toSrgb);
  const low = maxCode / 255;
  const high = maxCode - low;
  const out = new Float64Array(side * side);
  for (let row = 0; row < side; row++) {
    let at = ((top + row) * width + left) * 3;
    for (let col = 0; col < side; col++, at += 3) {
      const r = data[at]!;
      const g = data[at + 1]!;
      const b = data[at + 2]!;
      if (Math.min(r, g, b) <= low || Math.max(r, g, b) >= high) return null;
      out[row * side + col] = wr * red[r]! + wg * green[g]! + wb * blue[b]!;
    }
  }
  return out;
}

/** Luminance from the file's own primaries. */
export function luminanceWeights(toSrgb: readonly number[] | null): [number, number, number] {
  const at = (c: number) =>
    toSrgb ? weights.reduce((sum, w, row) => sum + w * toSrgb[row * 3 + c]!, 0) : weights[c]!;
  return [at(0), at(1), at(2)];
}

/** Takes a quadratic surface from the pixels inside; returns its mean. */
function subtractSurface(plane: Float64Array, inside: Uint8Array, side: number): number | null {
  const normal = new Float64Array(unknowns * unknowns);
  const right = new Float64Array(unknowns);
  const row = new Float64Array(unknowns);
  const scale = 2 / side;
  let sum = 0;
  let count = 0;
  for (let i = 0; i < plane.length; i++) {
    if (!inside[i]) continue;
    fillRow(row, (i % side) * scale - 1, Math.floor(i / side) * scale - 1);
    const value = plane[i]!;
    sum += value;
    count++;
    for (let j = 0; j < unknowns; j++) {
      right[j]! += row[j]! * value;
      for (let k = 0; k <= j; k++) normal[j * unknowns + k]! += row[j]! * row[k]!;
    }
  }
  if (!solveSpd(normal, right)) return null;
  for (let i = 0; i < plane.length; i++) {
    fillRow(row, (i % side) * scale - 1, Math.floor(i / side) * scale - 1);
    let surface = 0;
    for (let j = 0; j < unknowns; j++) surface += right[j]! * row[j]!;
    plane[i]! -= surface;
  }
  return sum / count;
}

function fillRow(row: Float64Array, x: number, y: number): void {
  row[0] = 1;
  row[1] = x;
  row[2] = y;
  row[3] = x * x;
  row[4] = x * y;
  row[5] = y * y;
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
