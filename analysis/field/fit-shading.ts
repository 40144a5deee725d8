import { quadraticForm, solveSpd } from '../numeric/spd.ts';

/** Light of a plain spot. */
export interface LightSpot {
  /** Half diagonals from the frame's centre. */
  readonly x: number;
  readonly y: number;
  /** log2 of the light, any scale. */
  readonly ev: number;
  /** Standard uncertainty of `ev`. */
  readonly uncertainty: number;
}

export interface ShadingFit {
  /** Level, then R², R⁴, R⁶, x, y. */
  readonly coefficients: Float64Array;
  readonly covariance: Float64Array;
}

const unknowns = 6;
/**
 * How far each coefficient may stray from 0 before data is seen, EV. Vignetting of ordinary lenses runs to some 2 EV; its higher
 * powers are smaller (cos⁴ at 30°: −0.96 R² + 0.16 R⁴ − 0.04 R⁶). They decide how doubtful the corners are that no spot lies near.
 */
const spread = [100, 3, 0.5, 0.06, 1, 1];

/** log2 light = level + q₁R² + q₂R⁴ + q₃R⁶ + tilt: a lens's fall of light, and a light that stands to one side. */
export function fitShading(spots: readonly LightSpot[]): ShadingFit | null {
  const normal = new Float64Array(unknowns * unknowns);
  const right = new Float64Array(unknowns);
  const level = spots.reduce((s, spot) => s + spot.ev, 0) / spots.length;
  for (const spot of spots) {
    const weight = 1 / spot.uncertainty ** 2;
    const row = rowAt(spot.x, spot.y);
    for (let j = 0; j < unknowns; j++) {
      right[j]! += weight * row[j]! * (spot.ev - level);
      for (let k = 0; k <= j; k++) normal[j * unknowns + k]! += weight * row[j]! * row[k]!;
    }
  }
  for (let j = 0; j < unknowns; j++) normal[j * unknowns + j]! += 1 / spread[j]! ** 2;
  if (!solveSpd(normal, right)) return null;
  let misfit = 0;
  for (const spot of spots) {
    const row = rowAt(spot.x, spot.y);
    const model = row.reduce((s, r, j) => s + r * right[j]!, 0);
    misfit += ((spot.ev - level - model) / spot.uncertainty) ** 2;
  }
  const widen = Math.max(1, misfit / Math.max(1, spots.length - unknowns));
  return { coefficients: right, covariance: normal.map((v) => v * widen) };
}

function rowAt(x: number, y: number): number[] {
  const square = x * x + y * y;
  return [1, square, square ** 2, square ** 3, x, y];
}

/** EV at a point against the frame's centre. */
export function shadingAt(fit: ShadingFit, x: number, y: number): number {
  const row = rowAt(x, y);
  let sum = 0;
  for (let j = 1; j < unknowns; j++) sum += fit.coefficients[j]! * row[j]!;
  return sum;
}

/** Standard uncertainty of Σ share · EV at the points, each against the centre. */
export function shadingUncertainty(
  fit: ShadingFit,
  points: readonly { at: readonly [number, number]; share: number }[],
): number {
  const gradient = new Float64Array(unknowns);
  for (const { at, share } of points) {
    const row = rowAt(...at);
    for (let j = 1; j < unknowns; j++) gradient[j]! += share * row[j]!;
  }
  return Math.sqrt(quadraticForm(fit.covariance, gradient));
}
