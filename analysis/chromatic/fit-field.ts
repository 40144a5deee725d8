import type { Point } from '../image.ts';
import { quadraticForm, solveSpd } from '../numeric/spd.ts';

/** A station's displacement against green, px, x right and y down. */
export interface Displaced {
  readonly station: string;
  readonly at: Point;
  readonly x: number;
  readonly y: number;
  /** Variance of x, covariance, variance of y, px². */
  readonly covariance: readonly [number, number, number];
}

export interface FieldFit {
  /** Constant shift x and y, px, then magnification, then (if asked for) its growth with the square of the image height. */
  readonly coefficients: Float64Array;
  readonly covariance: Float64Array;
  /** Variance, px², that the stations scatter by beyond their own. */
  readonly extraVariance: number;
  readonly centre: Point;
  /** Half the diagonal, px. */
  readonly reach: number;
}

/**
 * Weighted least squares of displacement = shift + (m + b (r/reach)²) · (at − centre) over the stations.
 * Compression and interpolation scatter the stations beyond what their pixels' noise predicts; that scatter is found from the fit
 * (Paule & Mandel 1982: the extra variance that makes χ² equal to its degrees of freedom) and enters every weight.
 * @returns null with too few stations for one degree of freedom
 */
export function fitField(
  displaced: readonly Displaced[],
  centre: Point,
  reach: number,
  bent: boolean,
): FieldFit | null {
  const n = bent ? 4 : 3;
  const freedom = 2 * displaced.length - n;
  if (displaced.length < 3 || freedom < 2) return null;
  let low = 0;
  let high = 0.25;
  let fit = fitWith(displaced, centre, reach, n, 0);
  if (!fit) return null;
  if (misfit(displaced, fit) > freedom) {
    for (let i = 0; i < 24; i++) {
      const middle = (low + high) / 2;
      fit = fitWith(displaced, centre, reach, n, middle);
      if (!fit) return null;
      if (misfit(displaced, fit) > freedom) low = middle;
      else high = middle;
    }
  }
  return fit;
}

/** The fitted displacement at a point, px. */
export function fieldAt(fit: FieldFit, at: Point): Point {
  const { coefficients: c, centre, reach } = fit;
  const px = at.x - centre.x;
  const py = at.y - centre.y;
  const m = c[2]! + (c.length > 3 ? (c[3]! * (px * px + py * py)) / reach ** 2 : 0);
  return { x: c[0]! + m * px, y: c[1]! + m * py };
}

/** Variance of the fitted displacement's x at a point, px². */
export function fieldVariance(fit: FieldFit, at: Point): number {
  return quadraticForm(fit.covariance, gradientAt(fit, at)[0]);
}

function gradientAt(
  { coefficients, centre, reach }: Pick<FieldFit, 'coefficients' | 'centre' | 'reach'>,
  at: Point,
): [number[], number[]] {
  const px = at.x - centre.x;
  const py = at.y - centre.y;
  const square = (px * px + py * py) / reach ** 2;
  const n = coefficients.length;
  return [[1, 0, px, px * square].slice(0, n), [0, 1, py, py * square].slice(0, n)];
}

function misfit(displaced: readonly Displaced[], fit: FieldFit): number {
  let sum = 0;
  for (const d of displaced) {
    const model = fieldAt(fit, d.at);
    sum += (d.x - model.x) ** 2 / (d.covariance[0] + fit.extraVariance);
    sum += (d.y - model.y) ** 2 / (d.covariance[2] + fit.extraVariance);
  }
  return sum;
}

/** The small covariance between a station's x and y is left out of the weights. */
function fitWith(
  displaced: readonly Displaced[],
  centre: Point,
  reach: number,
  n: number,
  extraVariance: number,
): FieldFit | null {
  const covariance = new Float64Array(n * n);
  const coefficients = new Float64Array(n);
  for (const d of displaced) {
    const [gx, gy] = gradientAt({ coefficients, centre, reach }, d.at);
    const wx = 1 / (d.covariance[0] + extraVariance);
    const wy = 1 / (d.covariance[2] + extraVariance);
    for (let j = 0; j < n; j++) {
      coefficients[j]! += wx * gx[j]! * d.x + wy * gy[j]! * d.y;
      for (let k = 0; k < n; k++)
        covariance[j * n + k]! += wx * gx[j]! * gx[k]! + wy * gy[j]! * gy[k]!;
    }
  }
  if (!solveSpd(covariance, coefficients)) return null;
  return { coefficients, covariance, extraVariance, centre, reach };
}
