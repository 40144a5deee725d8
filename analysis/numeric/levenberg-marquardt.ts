import { invertMatrix, solveLinear } from './linear-solve.ts';

/** Writes the residuals at `parameters` into `out`. */
export type ResidualFunction = (parameters: Float64Array, out: Float64Array) => void;

export interface LeastSquaresOptions {
  /** Steps of the central differences, one a parameter. */
  readonly steps: ArrayLike<number>;
  /** Default 30. */
  readonly iterations?: number;
  /** Stop once the sum of squares falls by less than this share of itself. Default 1e-10. */
  readonly tolerance?: number;
}

export interface LeastSquaresResult {
  readonly parameters: Float64Array;
  readonly sumOfSquares: number;
  /** (JᵀJ)⁻¹, row-major, or null when the residuals don't determine every parameter. */
  readonly covariance: Float64Array | null;
}

/**
 * Least squares by Levenberg's and Marquardt's damping (Marquardt, J. SIAM 11 (1963) 431), Jacobian by central differences.
 * Residuals must be finite near the start; a step to where they aren't is taken back.
 */
export function leastSquares(
  residuals: ResidualFunction,
  start: ArrayLike<number>,
  count: number,
  options: LeastSquaresOptions,
): LeastSquaresResult {
  const { steps, iterations = 30, tolerance = 1e-10 } = options;
  const n = start.length;
  let parameters = Float64Array.from(start);
  const here = new Float64Array(count);
  const there = new Float64Array(count);
  const jacobian = new Float64Array(count * n);
  residuals(parameters, here);
  let sum = sumOfSquares(here);
  let damping = 1e-3;
  for (let iteration = 0; iteration < iterations; iteration++) {
    fillJacobian(residuals, parameters, steps, jacobian, count);
    const { normal, gradient } = normalEquations(jacobian, here, n);
    let fall = 0;
    for (let attempt = 0; attempt < 12 && fall <= 0; attempt++) {
      const trial = dampedStep(normal, gradient, parameters, damping);
      if (trial) {
        residuals(trial, there);
        const trialSum = sumOfSquares(there);
        if (trialSum <= sum) {
          fall = (sum - trialSum) / (sum + 1e-300);
          parameters = trial;
          here.set(there);
          sum = trialSum;
          damping = Math.max(damping / 10, 1e-12);
          break;
        }
      }
      damping *= 8;
    }
    if (fall < tolerance) break;
  }
  fillJacobian(residuals, parameters, steps, jacobian, count);
  const { normal } = normalEquations(jacobian, here, n);
  return { parameters, sumOfSquares: sum, covariance: invertMatrix(normal, n) };
}

function sumOfSquares(values: Float64Array): number {
  let sum = 0;
  for (const value of values) sum += value * value;
  return Number.isFinite(sum) ? sum : Number.POSITIVE_INFINITY;
}

/** Column p of the Jacobian stands at [p · count …]. */
function fillJacobian(
  residuals: ResidualFunction,
  parameters: Float64Array,
  steps: ArrayLike<number>,
  jacobian: Float64Array,
  count: number,
): void {
  const moved = Float64Array.from(parameters);
  const behind = new Float64Array(count);
  for (let p = 0; p < parameters.length; p++) {
    const step = steps[p]!;
    const column = jacobian.subarray(p * count, (p + 1) * count);
    moved[p] = parameters[p]! + step;
    residuals(moved, column);
    moved[p] = parameters[p]! - step;
    residuals(moved, behind);
    moved[p] = parameters[p]!;
    for (let i = 0; i < count; i++) column[i] = (column[i]! - behind[i]!) / (2 * step);
  }
}

function normalEquations(jacobian: Float64Array, residual: Float64Array, n: number) {
  const count = residual.length;
  const normal = new Float64Array(n * n);
  const gradient = new Float64Array(n);
  for (let p = 0; p < n; p++) {
    for (let q = p; q < n; q++) {
      let sum = 0;
      for (let i = 0; i < count; i++) sum += jacobian[p * count + i]! * jacobian[q * count + i]!;
      normal[p * n + q] = sum;
      normal[q * n + p] = sum;
    }
    let sum = 0;
    for (let i = 0; i < count; i++) sum += jacobian[p * count + i]! * residual[i]!;
    gradient[p] = sum;
  }
  return { normal, gradient };
}

function dampedStep(
  normal: Float64Array,
  gradient: Float64Array,
  parameters: Float64Array,
  damping: number,
): Float64Array<ArrayBuffer> | null {
  const n = gradient.length;
  const damped = Float64Array.from(normal);
  for (let p = 0; p < n; p++) damped[p * n + p]! *= 1 + damping;
  const step = solveLinear(damped, gradient, n);
  return step && Float64Array.from(parameters, (value, p) => value - step[p]!);
}
