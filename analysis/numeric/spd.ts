/**
 * Solves N c = b for a symmetric positive definite N by Cholesky, and inverts N.
 * @param normal   row-major n × n, overwritten by its inverse
 * @param right    n values, overwritten by the solution
 * @returns false when N is not positive definite; both arrays are then of no use
 */
export function solveSpd(normal: Float64Array, right: Float64Array): boolean {
  const n = right.length;
  if (!factor(normal, n)) return false;
  invertLower(normal, n);
  const solution = new Float64Array(n);
  for (let i = 0; i < n; i++) {
    let sum = 0;
    for (let j = 0; j <= i; j++) sum += normal[i * n + j]! * right[j]!;
    for (let j = 0; j <= i; j++) solution[j]! += normal[i * n + j]! * sum;
  }
  right.set(solution);
  multiplyTransposed(normal, n);
  return true;
}

/** N = L Lᵀ; L in the lower triangle. */
function factor(a: Float64Array, n: number): boolean {
  for (let j = 0; j < n; j++) {
    let diagonal = a[j * n + j]!;
    const scale = diagonal;
    for (let k = 0; k < j; k++) diagonal -= a[j * n + k]! ** 2;
    if (!(diagonal > 1e-14 * scale)) return false;
    const root = Math.sqrt(diagonal);
    a[j * n + j] = root;
    for (let i = j + 1; i < n; i++) {
      let sum = a[i * n + j]!;
      for (let k = 0; k < j; k++) sum -= a[i * n + k]! * a[j * n + k]!;
      a[i * n + j] = sum / root;
    }
  }
  return true;
}

function invertLower(a: Float64Array, n: number): void {
  for (let j = 0; j < n; j++) {
    a[j * n + j] = 1 / a[j * n + j]!;
    for (let i = j + 1; i < n; i++) {
      let sum = 0;
      for (let k = j; k < i; k++) sum -= a[i * n + k]! * a[k * n + j]!;
      a[i * n + j] = sum / a[i * n + i]!;
    }
  }
}

/** L⁻ᵀ L⁻¹, full and symmetric, in place of L⁻¹. */
function multiplyTransposed(a: Float64Array, n: number): void {
  const lower = a.slice();
  for (let i = 0; i < n; i++)
    for (let j = 0; j <= i; j++) {
      let sum = 0;
      for (let k = i; k < n; k++) sum += lower[k * n + i]! * lower[k * n + j]!;
      a[i * n + j] = sum;
      a[j * n + i] = sum;
    }
}

/** gᵀ C g: the variance of a function whose derivatives are g, C the covariance of its arguments. */
export function quadraticForm(covariance: Float64Array, gradient: ArrayLike<number>): number {
  const n = gradient.length;
  let sum = 0;
  for (let i = 0; i < n; i++)
    for (let j = 0; j < n; j++) sum += gradient[i]! * covariance[i * n + j]! * gradient[j]!;
  return sum;
}
