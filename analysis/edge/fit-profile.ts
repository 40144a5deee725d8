import { fastNormalCdf, fastNormalDensity, normalDensity } from '../numeric/normal.ts';
import { solveSpd } from '../numeric/spd.ts';
import { binsPerPixel } from './bin-samples.ts';
import type { Profile } from './trace-edges.ts';

/**
 * A line-spread function as a sum of Gaussians and their first derivatives, fitted to one or more edge-spread functions.
 * Finite differences, a window and a DFT would measure the same; the fit keeps their biases out (no derivative correction, no
 * window, no uneven phases to cut off) and lets a blurred or noisy edge say less about the frequencies it holds no light at.
 */
export interface ProfileFit {
  /** Deviations of the Gaussians, px. */
  readonly widths: readonly number[];
  /** Deviations of the derivatives of Gaussians, px: what makes the spread lopsided. */
  readonly skewWidths: readonly number[];
  /** One for each width, then one for each skew width. */
  readonly coefficients: Float64Array;
  /** Row-major covariance of the coefficients. */
  readonly covariance: Float64Array;
  /** Noise of a single pixel over the step. */
  readonly noise: number;
}

/** Widths over the edge's own, a little finer than a factor √2 apart; the wide ones carry the halo of sharpening. */
const ladder = [0.5, 0.72, 1, 1.4, 2, 2.9, 4.2, 6];
const skewLadder = [0.72, 1.4];
/** How far a coefficient may stray before data is seen. Wide enough for strong sharpening (amount 1.5 and more is reached). */
const coefficientSpread = 1;
const skewSpread = 0.3;
/** Change of light over ten pixels that uneven lighting may cause. */
const slopeSpread = 0.05;
/** Below this, rounding to codes rules and the noise estimate has no meaning. */
const leastNoise = 2e-4;
/** Neighbouring bins share JPEG's errors, so that fewer of them are independent than there are. Found on rendered scenes. */
const clumping = 1.2;

/** Where copies of an edge lie, px, and their weights, which sum to 1. */
export type Copies = readonly { readonly at: number; readonly weight: number }[];
const alone: Copies = [{ at: 0, weight: 1 }];

/**
 * @param copies  by profile: what of the fitted spread it is the sum of; absent: the spread itself
 * @returns null when the profiles hold too little to fit
 */
export function fitProfile(
  profiles: readonly Profile[],
  sigma: number,
  copies?: readonly Copies[],
): ProfileFit | null {
  const values = profiles.map((profile) => profile.value);
  return fitValues(designFit(profiles, sigma, copies), values);
}

/** All of a fit but the profiles' values, for fits to several sets of values at the same distances. */
export interface Design {
  readonly profiles: readonly Profile[];
  readonly widths: readonly number[];
  readonly skewWidths: readonly number[];
  /** Lower triangle of the normal equations: shared spread, then a level and a slope for each profile. */
  readonly normal: Float64Array;
  /** Rows of all profiles one after another: shared spread, level and slope. */
  readonly table: Float64Array;
  readonly rows: number;
}

/** For `fitValues`; parameters as for `fitProfile`. */
export function designFit(
  profiles: readonly Profile[],
  sigma: number,
  copies?: readonly Copies[],
): Design {
  const widest = Math.max(2.2 * sigma, Math.min(3.6, shortestReach(profiles) / 2));
  const widths = ladder.map((factor) => factor * sigma).filter((width) => width <= widest);
  const skewWidths = skewLadder.map((factor) => factor * sigma);
  const shared = widths.length + skewWidths.length;
  const columns = shared + 2;
  const n = shared + 2 * profiles.length;
  const rows = profiles.reduce((sum, { distance }) => sum + distance.length, 0);
  const normal = new Float64Array(n * n);
  const table = new Float64Array(rows * columns);
  const row = new Float64Array(columns);
  let next = 0;
  profiles.forEach(({ distance, pixels, floor }, p) => {
    const block = new Float64Array(columns * columns);
    for (let i = 0; i < distance.length; i++) {
      const d = distance[i]!;
      fillSpread(row, d, sigma, widths, skewWidths, copies?.[p] ?? alone);
      row[shared] = 1;
      row[shared + 1] = (d / 10) * (floor + fastNormalCdf(d / sigma));
      accumulate(block, row, pixels[i]!);
      table.set(row, next);
      next += columns;
    }
    addBlock(normal, n, block, shared, p);
  });
  return { profiles, widths, skewWidths, normal, table, rows };
}

/** @param values  by profile, in place of its own; @returns null when they hold too little to fit */
export function fitValues(design: Design, values: readonly Float64Array[]): ProfileFit | null {
  const { profiles, widths, skewWidths, rows } = design;
  const shared = widths.length + skewWidths.length;
  const n = shared + 2 * profiles.length;
  if (rows < n + 12) return null;
  const system = { normal: design.normal, ...sumValues(design, values, shared) };
  let noise = 0.02;
  let solved: Solution | null = null;
  for (let pass = 0; pass < 3; pass++) {
    solved = solve(system, n, widths.length, shared, noise);
    if (!solved) return null;
    noise = Math.max(leastNoise, clumping * Math.sqrt(solved.squares / (rows - 0.7 * n)));
  }
  if (!solved) return null;
  const covariance = new Float64Array(shared * shared);
  for (let i = 0; i < shared; i++)
    for (let j = 0; j < shared; j++) covariance[i * shared + j] = solved.inverse[i * n + j]!;
  const coefficients = solved.coefficients.slice(0, shared);
  return { widths, skewWidths, coefficients, covariance, noise };
}

function shortestReach(profiles: readonly Profile[]): number {
  let shortest = Number.POSITIVE_INFINITY;
  for (const { distance } of profiles)
    shortest = Math.min(shortest, -distance[0]!, distance[distance.length - 1]!);
  return shortest;
}

interface System {
  readonly normal: Float64Array;
  readonly right: Float64Array;
  /** Σ weight · value². */
  readonly total: number;
}

interface Solution {
  readonly coefficients: Float64Array;
  readonly inverse: Float64Array;
  readonly squares: number;
}

/** What of the normal equations hangs on the values. */
function sumValues(
  { profiles, table }: Design,
  values: readonly Float64Array[],
  shared: number,
): { right: Float64Array; total: number } {
  const columns = shared + 2;
  const right = new Float64Array(shared + 2 * profiles.length);
  let total = 0;
  let at = 0;
  profiles.forEach(({ pixels }, p) => {
    const own = values[p]!;
    const after = 2 * p;
    for (let i = 0; i < pixels.length; i++) {
      const weighted = pixels[i]! * own[i]!;
      total += weighted * own[i]!;
      for (let j = 0; j < shared; j++) right[j]! += table[at + j]! * weighted;
      right[shared + after]! += weighted;
      right[shared + after + 1]! += table[at + shared + 1]! * weighted;
      at += columns;
    }
  });
  return { right, total };
}

/** A profile's sums to their places among all. */
function addBlock(
  normal: Float64Array,
  n: number,
  block: Float64Array,
  shared: number,
  profile: number,
): void {
  const columns = shared + 2;
  const place = (j: number) => (j < shared ? j : j + 2 * profile);
  for (let j = 0; j < columns; j++)
    for (let k = 0; k <= j; k++) normal[place(j) * n + place(k)]! += block[j * columns + k]!;
}

function fillSpread(
  row: Float64Array,
  d: number,
  sigma: number,
  widths: readonly number[],
  skewWidths: readonly number[],
  copies: Copies,
): void {
  const gaussians = widths.length;
  row.fill(0, 0, gaussians + skewWidths.length);
  for (let copy = 0; copy < copies.length; copy++) {
    const { at, weight } = copies[copy]!;
    for (let i = 0; i < gaussians; i++) row[i]! += weight * fastNormalCdf((d - at) / widths[i]!);
    for (let i = 0; i < skewWidths.length; i++) {
      const width = skewWidths[i]!;
      row[gaussians + i]! += (weight * fastNormalDensity((d - at) / width) * sigma) / width;
    }
  }
}

/** Lower triangle of Σ weight · row · rowᵀ. */
function accumulate(block: Float64Array, row: Float64Array, weight: number): void {
  const n = row.length;
  for (let j = 0; j < n; j++) {
    const weighted = row[j]! * weight;
    if (weighted === 0) continue;
    for (let k = 0; k <= j; k++) block[j * n + k]! += weighted * row[k]!;
  }
}

function solve(
  system: System,
  n: number,
  gaussians: number,
  shared: number,
  noise: number,
): Solution | null {
  const precision = 1 / noise ** 2;
  const inverse = system.normal.map((v) => v * precision);
  const coefficients = system.right.map((v) => v * precision);
  for (let j = 0; j < n; j++) inverse[j * n + j]! += priorPrecision(j, gaussians, shared);
  const own = ladder.indexOf(1);
  coefficients[own]! += priorPrecision(own, gaussians, shared);
  if (!solveSpd(inverse, coefficients)) return null;
  return { coefficients, inverse, squares: residualSquares(system, coefficients) };
}

function priorPrecision(index: number, gaussians: number, shared: number): number {
  if (index < gaussians) return 1 / coefficientSpread ** 2;
  if (index < shared) return 1 / skewSpread ** 2;
  return (index - shared) % 2 === 0 ? 1 : 1 / slopeSpread ** 2;
}

/** Σ w (y − A c)² from the sums alone. */
function residualSquares(system: System, c: Float64Array): number {
  const n = c.length;
  let sum = system.total;
  for (let j = 0; j < n; j++) {
    sum -= 2 * c[j]! * system.right[j]!;
    for (let k = 0; k < n; k++)
      sum += c[j]! * c[k]! * system.normal[j >= k ? j * n + k : k * n + j]!;
  }
  return Math.max(0, sum);
}

/** Modulus of the spread's Fourier transform at f cy/px, 1 at 0; with `gradient`, its derivatives by the coefficients. */
export function responseAt(fit: ProfileFit, f: number, gradient?: Float64Array): number {
  const { widths, skewWidths, coefficients } = fit;
  const k = widths.length;
  const sigma = skewWidths[0]! / skewLadder[0]!;
  let even = 0;
  let odd = 0;
  let total = 0;
  for (let i = 0; i < k; i++) {
    const c = coefficients[i]!;
    even += c * gaussian(widths[i]!, f);
    total += c;
  }
  for (let i = 0; i < skewWidths.length; i++)
    odd += coefficients[k + i]! * 2 * Math.PI * f * sigma * gaussian(skewWidths[i]!, f);
  const modulus = Math.hypot(even, odd);
  // The box of the bins, 1/8 px wide, has blurred what was fitted.
  const bin = sinc(f / binsPerPixel);
  const response = modulus / total / bin;
  if (gradient) {
    const unit = 1 / (Math.max(modulus, 1e-9) * total * bin);
    for (let i = 0; i < k; i++)
      gradient[i] = even * gaussian(widths[i]!, f) * unit - response / total;
    for (let i = 0; i < skewWidths.length; i++)
      gradient[k + i] = odd * 2 * Math.PI * f * sigma * gaussian(skewWidths[i]!, f) * unit;
  }
  return response;
}

/** Edge-spread function at a distance d px, 0 far to the dark side and 1 far to the light side. */
export function spreadAt(fit: ProfileFit, d: number, gradient?: Float64Array): number {
  const { widths, skewWidths, coefficients } = fit;
  const k = widths.length;
  const sigma = skewWidths[0]! / skewLadder[0]!;
  let sum = 0;
  let total = 0;
  for (let i = 0; i < k; i++) {
    sum += coefficients[i]! * fastNormalCdf(d / widths[i]!);
    total += coefficients[i]!;
  }
  for (let i = 0; i < skewWidths.length; i++)
    sum += (coefficients[k + i]! * normalDensity(d / skewWidths[i]!) * sigma) / skewWidths[i]!;
  if (gradient) {
    for (let i = 0; i < k; i++) gradient[i] = (fastNormalCdf(d / widths[i]!) - sum / total) / total;
    for (let i = 0; i < skewWidths.length; i++)
      gradient[k + i] = (normalDensity(d / skewWidths[i]!) * sigma) / skewWidths[i]! / total;
  }
  return sum / total;
}

function gaussian(width: number, f: number): number {
  return Math.exp(-2 * (Math.PI * width * f) ** 2);
}

function sinc(x: number): number {
  return x === 0 ? 1 : Math.sin(Math.PI * x) / (Math.PI * x);
}
