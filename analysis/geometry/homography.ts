import type { Point } from '../image.ts';
import { invertMatrix, solveLinear } from '../numeric/linear-solve.ts';

/** Row-major 3 × 3 with the last element 1 where it can be. */
export type Homography = ArrayLike<number>;

export function applyHomography(h: Homography, x: number, y: number): Point {
  const w = h[6]! * x + h[7]! * y + h[8]!;
  return {
    x: (h[0]! * x + h[1]! * y + h[2]!) / w,
    y: (h[3]! * x + h[4]! * y + h[5]!) / w,
  };
}

export function invertHomography(h: Homography): Float64Array | null {
  return invertMatrix(h, 3);
}

/**
 * The homography that takes `from` to `to`, least squares of the linear equations in coordinates moved to their centroid and
 * scaled to √2 (Hartley, IEEE PAMI 19 (1997) 580). Exact for four points of which no three are in line.
 * @returns row-major 3 × 3 with last element 1, or null when the points don't determine one
 */
export function homographyFromPoints(
  from: readonly Point[],
  to: readonly Point[],
): Float64Array | null {
  if (from.length < 4 || from.length !== to.length) return null;
  const a = normalisation(from);
  const b = normalisation(to);
  const normal = new Float64Array(64);
  const right = new Float64Array(8);
  for (let i = 0; i < from.length; i++) {
    const x = (from[i]!.x - a.x) * a.scale;
    const y = (from[i]!.y - a.y) * a.scale;
    const u = (to[i]!.x - b.x) * b.scale;
    const v = (to[i]!.y - b.y) * b.scale;
    addEquation(normal, right, [x, y, 1, 0, 0, 0, -u * x, -u * y], u);
    addEquation(normal, right, [0, 0, 0, x, y, 1, -v * x, -v * y], v);
  }
  const h = solveLinear(normal, right, 8);
  if (!h) return null;
  const forward = [a.scale, 0, -a.x * a.scale, 0, a.scale, -a.y * a.scale, 0, 0, 1];
  const back = [1 / b.scale, 0, b.x, 0, 1 / b.scale, b.y, 0, 0, 1];
  const whole = multiply3(back, multiply3([...h, 1], forward));
  return whole[8] === 0 ? null : Float64Array.from(whole, (value) => value / whole[8]!);
}

function normalisation(points: readonly Point[]) {
  const x = points.reduce((sum, p) => sum + p.x, 0) / points.length;
  const y = points.reduce((sum, p) => sum + p.y, 0) / points.length;
  const spread = points.reduce((sum, p) => sum + Math.hypot(p.x - x, p.y - y), 0) / points.length;
  return { x, y, scale: spread > 0 ? Math.SQRT2 / spread : 1 };
}

function addEquation(normal: Float64Array, right: Float64Array, row: number[], value: number) {
  for (let p = 0; p < 8; p++) {
    for (let q = 0; q < 8; q++) normal[p * 8 + q]! += row[p]! * row[q]!;
    right[p]! += row[p]! * value;
  }
}

function multiply3(a: ArrayLike<number>, b: ArrayLike<number>): number[] {
  const product: number[] = [];
  for (let row = 0; row < 3; row++) {
    for (let col = 0; col < 3; col++) {
      product.push(
        a[row * 3]! * b[col]! + a[row * 3 + 1]! * b[3 + col]! + a[row * 3 + 2]! * b[6 + col]!,
      );
    }
  }
  return product;
}
