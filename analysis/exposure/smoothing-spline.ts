import { solveSpd } from '../numeric/spd.ts';
import type { FitPoint } from './local-fit.ts';

/** A cubic smoothing spline; straight beyond its outermost points. */
export type Spline = (at: number) => number;

/**
 * Bends that are tried: standard deviation of the change of slope over one unit of x. A camera's contrast curve has some 0.1; the
 * start of a shoulder 0.5 and more. Our choice of a grid; the points decide.
 */
const bends = [0.01, 0.03, 0.1, 0.2, 0.4, 0.8, 1.6];
/** Scatter of the points beyond their own σ that is tried (a print's tolerance, uneven light). Our choice of a grid. */
const scatters = [0, 0.003, 0.01, 0.03];
/** What is known of level and slope before: as good as nothing. */
const levelVariance = 100;
const slopeVariance = 10;

interface Kernel {
  readonly x: readonly number[];
  readonly bend: number;
}

/**
 * Smoothing spline with its smoothness found by maximum likelihood: the points are a straight line, an integrated Wiener process and
 * noise (Wahba, J. R. Stat. Soc. B 40 (1978) 364: the process's posterior mean is the cubic smoothing spline). It bends as sharply as
 * points well told ask for, and no more than points ill told can bear.
 * @param points four and more, in any order
 */
export function smoothingSpline(points: readonly FitPoint[]): Spline | null {
  if (points.length < 4) return null;
  const x = points.map((p) => p.x);
  let best: { likelihood: number; weights: Float64Array; kernel: Kernel } | null = null;
  for (const bend of bends)
    for (const scatter of scatters) {
      const kernel = { x, bend };
      const solved = solveKernel(points, kernel, scatter);
      if (solved && (!best || solved.likelihood > best.likelihood)) best = { ...solved, kernel };
    }
  if (!best) return null;
  const { weights, kernel } = best;
  return (at) => x.reduce((sum, _, i) => sum + weights[i]! * covariance(kernel, at, i), 0);
}

function solveKernel(
  points: readonly FitPoint[],
  kernel: Kernel,
  scatter: number,
): { likelihood: number; weights: Float64Array } | null {
  const n = points.length;
  const matrix = new Float64Array(n * n);
  for (let i = 0; i < n; i++) {
    for (let j = 0; j <= i; j++) matrix[i * n + j] = covariance(kernel, points[i]!.x, j);
    matrix[i * n + i]! += points[i]!.sigma ** 2 + scatter ** 2;
  }
  const determinant = logDeterminant(matrix, n);
  const weights = Float64Array.from(points, (p) => p.y);
  if (determinant === null || !solveSpd(matrix, weights)) return null;
  const misfit = points.reduce((sum, p, i) => sum + p.y * weights[i]!, 0);
  return { likelihood: -0.5 * (misfit + determinant), weights };
}

/** Of the value at `at` with that at the i-th point. */
function covariance({ x, bend }: Kernel, at: number, i: number): number {
  const middle = x[0]!;
  const a = at - middle;
  const b = x[i]! - middle;
  return levelVariance + slopeVariance * a * b + bend * bend * integratedWiener(a, b);
}

/** Two processes that start from zero at the middle and run to either side. */
function integratedWiener(a: number, b: number): number {
  if (a * b <= 0) return 0;
  const near = Math.min(Math.abs(a), Math.abs(b));
  const far = Math.max(Math.abs(a), Math.abs(b));
  return (near * near * (3 * far - near)) / 6;
}

function logDeterminant(matrix: Float64Array, n: number): number | null {
  const a = matrix.slice();
  let sum = 0;
  for (let j = 0; j < n; j++) {
    let pivot = a[j * n + j]!;
    for (let k = 0; k < j; k++) pivot -= a[j * n + k]! ** 2;
    if (!(pivot > 0)) return null;
    sum += Math.log(pivot);
    const root = Math.sqrt(pivot);
    a[j * n + j] = root;
    for (let i = j + 1; i < n; i++) {
      let rest = a[i * n + j]!;
      for (let k = 0; k < j; k++) rest -= a[i * n + k]! * a[j * n + k]!;
      a[i * n + j] = rest / root;
    }
  }
  return sum;
}
