/** Coefficients of r′ = r (1 + k₁ r² + k₂ r⁴ + k₃ r⁶); r is the image height, 1 at half the frame's diagonal. */
export type RadialCoefficients = readonly [number, number, number];

/** r′ / r at the square of the undistorted image height. */
export function radialFactor(k: RadialCoefficients, r2: number): number {
  return 1 + r2 * (k[0] + r2 * (k[1] + r2 * k[2]));
}

/** d(r′/r) / d(r²). */
export function radialFactorSlope(k: RadialCoefficients, r2: number): number {
  return k[0] + r2 * (2 * k[1] + r2 * 3 * k[2]);
}

/**
 * The undistorted image height that is seen at `distorted`: Newton's method, inside a bracket on the branch that starts at 0.
 * Where a strong barrel never reaches that height, the height of its largest image.
 */
export function undistortedHeight(k: RadialCoefficients, distorted: number): number {
  if (distorted === 0) return 0;
  let low = 0;
  let high = Number.POSITIVE_INFINITY;
  let r = distorted;
  for (let iteration = 0; iteration < 100; iteration++) {
    const r2 = r * r;
    const factor = radialFactor(k, r2);
    const slope = factor + 2 * r2 * radialFactorSlope(k, r2);
    const error = r * factor - distorted;
    if (slope <= 0 || error > 0) high = r;
    else low = r;
    let next = r - error / slope;
    if (slope <= 0 || !(next > low && next < high)) {
      next = high === Number.POSITIVE_INFINITY ? r * 1.5 : (low + high) / 2;
    }
    if (Math.abs(next - r) <= 1e-15 * r) return next;
    r = next;
  }
  return r;
}
