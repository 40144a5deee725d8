import { solveLinear } from '../numeric/linear-solve.ts';

export interface FitPoint {
  readonly x: number;
  readonly y: number;
  /** Standard uncertainty of y, that of x included through the slope. */
  readonly sigma: number;
}

export interface LocalFit {
  readonly value: number;
  readonly slope: number;
  /** Standard uncertainty of `value`: that of the points, or their scatter about the fit where it is larger. */
  readonly uncertainty: number;
}

/**
 * Local regression (Cleveland, J. Am. Stat. Assoc. 74 (1979) 829): a parabola through the nearest points, tricube weights.
 * @param points in any order, four and more
 * @param at     where to evaluate, in x
 * @param reach  half-width of the weights in x; widened until six points (or all) carry weight
 */
export function localFit(points: readonly FitPoint[], at: number, reach: number): LocalFit | null {
  const distances = points.map((p) => Math.abs(p.x - at)).sort((a, b) => a - b);
  const sixth = distances[Math.min(6, distances.length - 1)]!;
  const width = Math.max(reach, sixth * 1.001);
  const near = points.filter((p) => Math.abs(p.x - at) < width);
  if (near.length < 4) return null;
  const weights = near.map((p) => (1 - (Math.abs(p.x - at) / width) ** 3) ** 3 / p.sigma ** 2);
  const scale = weights.reduce((sum, w) => sum + w, 0) / near.length;
  const normal = new Float64Array(9);
  // Right-hand sides of value and slope as linear functions of the y: one column a point.
  const right = new Float64Array(3 * near.length);
  near.forEach((p, k) => {
    const w = weights[k]! / scale;
    const d = (p.x - at) / width;
    const basis = [1, d, d * d];
    for (let i = 0; i < 3; i++) {
      for (let j = 0; j < 3; j++) normal[i * 3 + j]! += w * basis[i]! * basis[j]!;
      right[i * near.length + k] = w * basis[i]!;
    }
  });
  const influence = solveLinear(normal, right, 3, near.length);
  if (!influence) return null;
  const coefficient = (i: number) =>
    near.reduce((sum, p, k) => sum + influence[i * near.length + k]! * p.y, 0);
  const [value, linear, quadratic] = [coefficient(0), coefficient(1), coefficient(2)] as const;
  let variance = 0;
  let scatter = 0;
  near.forEach((p, k) => {
    variance += (influence[k]! * p.sigma) ** 2;
    const d = (p.x - at) / width;
    const residual = p.y - value - linear * d - quadratic * d * d;
    scatter += (weights[k]! / scale) * (residual / p.sigma) ** 2;
  });
  const excess = Math.max(1, Math.sqrt(scatter / Math.max(1, near.length - 3)));
  return { value, slope: linear / width, uncertainty: Math.sqrt(variance) * excess };
}
