/** Row-major 3 × 3 matrices, and what colour needs of them. */
export type Triple = readonly [number, number, number];

export function multiply(a: readonly number[], b: readonly number[]): number[] {
  const product = new Array<number>(9);
  for (let row = 0; row < 3; row++) {
    for (let col = 0; col < 3; col++) {
      product[row * 3 + col] =
        a[row * 3]! * b[col]! + a[row * 3 + 1]! * b[3 + col]! + a[row * 3 + 2]! * b[6 + col]!;
    }
  }
  return product;
}

export function apply(m: readonly number[], [x, y, z]: Triple): [number, number, number] {
  return [
    m[0]! * x + m[1]! * y + m[2]! * z,
    m[3]! * x + m[4]! * y + m[5]! * z,
    m[6]! * x + m[7]! * y + m[8]! * z,
  ];
}

/** By the adjugate; null when the matrix is singular. */
export function invert(m: readonly number[]): number[] | null {
  const [a, b, c, d, e, f, g, h, i] = m as [
    number,
    number,
    number,
    number,
    number,
    number,
    number,
    number,
    number,
  ];
  const adjugate = [
    e * i - f * h,
    c * h - b * i,
    b * f - c * e,
    f * g - d * i,
    a * i - c * g,
    c * d - a * f,
    d * h - e * g,
    b * g - a * h,
    a * e - b * d,
  ];
  const determinant = a * adjugate[0]! + b * adjugate[3]! + c * adjugate[6]!;
  if (!Number.isFinite(determinant) || Math.abs(determinant) < 1e-12) return null;
  return adjugate.map((value) => value / determinant);
}

export const identity: readonly number[] = [1, 0, 0, 0, 1, 0, 0, 0, 1];
