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

export interface Magnification {
  /** Lateral magnification against green, ‰. */
  readonly permille: { readonly value: number; readonly uncertainty: number };
  /** Length of the constant displacement, px. */
  readonly shift: { readonly value: number; readonly uncertainty: number };
}

/**
 * Weighted least squares of displacement = shift + m · (at − centre) over the stations.
 * When the stations scatter more than their uncertainties say, the result's uncertainty grows with them.
 * @returns null with fewer than 3 stations
 */
export function fitMagnification(
  displaced: readonly Displaced[],
  centre: Point,
): Magnification | null {
  if (displaced.length < 3) return null;
  const normal = new Float64Array(9);
  const right = new Float64Array(3);
  for (const d of displaced) addStation(normal, right, d, centre);
  for (let j = 0; j < 3; j++)
    for (let k = j + 1; k < 3; k++) normal[j * 3 + k] = normal[k * 3 + j]!;
  if (!solveSpd(normal, right)) return null;
  const [sx, sy, m] = [right[0]!, right[1]!, right[2]!];
  let misfit = 0;
  for (const d of displaced) {
    const ex = d.x - sx - m * (d.at.x - centre.x);
    const ey = d.y - sy - m * (d.at.y - centre.y);
    misfit += ex ** 2 / d.covariance[0] + ey ** 2 / d.covariance[2];
  }
  const widen = Math.sqrt(Math.max(1, misfit / (2 * displaced.length - 3)));
  const length = Math.hypot(sx, sy);
  const along = length > 0 ? [sx / length, sy / length, 0] : [1, 0, 0];
  return {
    permille: { value: 1000 * m, uncertainty: 1000 * widen * Math.sqrt(normal[8]!) },
    shift: { value: length, uncertainty: widen * Math.sqrt(quadraticForm(normal, along)) },
  };
}

/** Both components share m; their small covariance is left out of the weights. */
function addStation(normal: Float64Array, right: Float64Array, d: Displaced, centre: Point): void {
  const wx = 1 / d.covariance[0];
  const wy = 1 / d.covariance[2];
  const px = d.at.x - centre.x;
  const py = d.at.y - centre.y;
  normal[0]! += wx;
  normal[4]! += wy;
  normal[6]! += wx * px;
  normal[7]! += wy * py;
  normal[8]! += wx * px * px + wy * py * py;
  right[0]! += wx * d.x;
  right[1]! += wy * d.y;
  right[2]! += wx * px * d.x + wy * py * d.y;
}
