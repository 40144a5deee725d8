/**
 * Solves A x = b by Gaussian elimination with partial pivoting.
 * @param a n × n, row-major; left as it is
 * @param b n × columns, row-major; left as it is
 * @returns n × columns, or null when A is singular to working precision
 */
export function solveLinear(
  a: ArrayLike<number>,
  b: ArrayLike<number>,
  n: number,
  columns = 1,
): Float64Array | null {
  const m = Float64Array.from(a);
  const x = Float64Array.from(b);
  for (let k = 0; k < n; k++) {
    const pivot = pivotRow(m, n, k);
    const size = Math.abs(m[pivot * n + k]!);
    if (!(size > 1e-300)) return null;
    swapRows(m, n, k, pivot);
    swapRows(x, columns, k, pivot);
    for (let row = k + 1; row < n; row++) {
      const factor = m[row * n + k]! / m[k * n + k]!;
      if (factor === 0) continue;
      for (let c = k; c < n; c++) m[row * n + c]! -= factor * m[k * n + c]!;
      for (let c = 0; c < columns; c++) x[row * columns + c]! -= factor * x[k * columns + c]!;
    }
  }
  for (let row = n - 1; row >= 0; row--) {
    for (let c = 0; c < columns; c++) {
      let sum = x[row * columns + c]!;
      for (let k = row + 1; k < n; k++) sum -= m[row * n + k]! * x[k * columns + c]!;
      x[row * columns + c] = sum / m[row * n + row]!;
    }
  }
  return x.every(Number.isFinite) ? x : null;
}

/** Inverse of an n × n matrix, row-major, or null when it is singular. */
export function invertMatrix(a: ArrayLike<number>, n: number): Float64Array | null {
  const unit = new Float64Array(n * n);
  for (let i = 0; i < n; i++) unit[i * n + i] = 1;
  return solveLinear(a, unit, n, n);
}

function pivotRow(m: Float64Array, n: number, k: number): number {
  let pivot = k;
  for (let row = k + 1; row < n; row++) {
    if (Math.abs(m[row * n + k]!) > Math.abs(m[pivot * n + k]!)) pivot = row;
  }
  return pivot;
}

function swapRows(m: Float64Array, width: number, i: number, j: number): void {
  if (i === j) return;
  for (let c = 0; c < width; c++) {
    const held = m[i * width + c]!;
    m[i * width + c] = m[j * width + c]!;
    m[j * width + c] = held;
  }
}
