import type { Point } from '../image.ts';
import { applyHomography, type Homography, invertHomography } from './homography.ts';
import {
  type RadialCoefficients,
  radialFactor,
  radialFactorSlope,
  undistortedHeight,
} from './radial.ts';

/** A plane seen through a lens: a homography to undistorted image heights, then radial distortion about the frame's centre. */
export interface LensMap {
  readonly width: number;
  readonly height: number;
  /** Plane → undistorted position from the frame's centre in half diagonals. */
  readonly homography: Homography;
  readonly radial: RadialCoefficients;
}

/** Plane → image pixels. */
export function planeToImage(map: LensMap, x: number, y: number): Point {
  const ideal = applyHomography(map.homography, x, y);
  const scale = halfDiagonal(map) * radialFactor(map.radial, ideal.x ** 2 + ideal.y ** 2);
  return { x: map.width / 2 + ideal.x * scale, y: map.height / 2 + ideal.y * scale };
}

/** Image pixels → plane, the inverse of `planeToImage`. */
export function imageToPlane(map: LensMap, inverse: Homography, x: number, y: number): Point {
  const unit = halfDiagonal(map);
  const dx = (x - map.width / 2) / unit;
  const dy = (y - map.height / 2) / unit;
  const seen = Math.hypot(dx, dy);
  const factor = seen === 0 ? 1 : undistortedHeight(map.radial, seen) / seen;
  return applyHomography(inverse, dx * factor, dy * factor);
}

/** Row-major [∂px/∂x, ∂px/∂y, ∂py/∂x, ∂py/∂y] of `planeToImage`. */
export function lensMapJacobian(
  map: LensMap,
  x: number,
  y: number,
): [number, number, number, number] {
  const h = map.homography;
  const w = h[6]! * x + h[7]! * y + h[8]!;
  const { x: a, y: b } = applyHomography(h, x, y);
  const ax = (h[0]! - a * h[6]!) / w;
  const ay = (h[1]! - a * h[7]!) / w;
  const bx = (h[3]! - b * h[6]!) / w;
  const by = (h[4]! - b * h[7]!) / w;
  const r2 = a * a + b * b;
  const factor = radialFactor(map.radial, r2);
  const slope = 2 * radialFactorSlope(map.radial, r2);
  const aa = factor + slope * a * a;
  const ab = slope * a * b;
  const bb = factor + slope * b * b;
  const unit = halfDiagonal(map);
  return [
    unit * (aa * ax + ab * bx),
    unit * (aa * ay + ab * by),
    unit * (ab * ax + bb * bx),
    unit * (ab * ay + bb * by),
  ];
}

/** The inverse homography that `imageToPlane` takes, made once. */
export function inverseOf(map: LensMap): Float64Array {
  const inverse = invertHomography(map.homography);
  if (!inverse) throw new RangeError('the homography of a lens map must be invertible');
  return inverse;
}

export function halfDiagonal(frame: { readonly width: number; readonly height: number }): number {
  // Math.hypot is many times slower than a square root, and this is asked for every point.
  return Math.sqrt(frame.width * frame.width + frame.height * frame.height) / 2;
}
