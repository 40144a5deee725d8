import type { Point } from '../image.ts';
import { invertMatrix } from '../numeric/linear-solve.ts';

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
