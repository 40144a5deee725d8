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

/** The homography that takes four points, no three in a line, to four others; null where there is none. */
export function homographyThrough(
  from: readonly Point[],
  to: readonly Point[],
): Float64Array | null {
  const a: number[] = [];
  const b: number[] = [];
  from.forEach(({ x, y }, i) => {
    const { x: u, y: v } = to[i]!;
    a.push(x, y, 1, 0, 0, 0, -u * x, -u * y, 0, 0, 0, x, y, 1, -v * x, -v * y);
    b.push(u, v);
  });
  const solution = solveLinear(a, b, 8);
  return solution && Float64Array.of(...solution, 1);
}
