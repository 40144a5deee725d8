import { invertMatrix, solveLinear } from './linear-solve.ts';

/**
 * Writes the residuals at `parameters` and, where asked, their derivatives: the derivative of residual i by parameter p stands at
 * jacobian[i · n + p].
 */
export type ResidualFunction = (
  parameters: Float64Array,
  residuals: Float64Array,
  jacobian: Float64Array | null,
) => void;

export interface LeastSquaresOptions {
  /** Default 30. */
  readonly iterations?: number;
  /** Stop once the sum of squares falls by less than this share of itself. Default 1e-9. */
  readonly tolerance?: number;
}

export interface LeastSquaresResult {
  readonly parameters: Float64Array;
  readonly sumOfSquares: number;
  /** (JᵀJ)⁻¹ at the solution, row-major, or null when the residuals don't determine every parameter. */
  readonly covariance: Float64Array | null;
}

/**
 * Least squares by Levenberg's and Marquardt's damping (Marquardt, J. SIAM 11 (1963) 431).
 * Residuals must be finite at the start; a step to where they aren't is taken back.
 * @param count number of residuals
 */
export function leastSquares(
  residuals: ResidualFunction,
  start: ArrayLike<number>,
  count: number,
  options: LeastSquaresOptions = {},
): LeastSquaresResult {
  const { iterations = 30, tolerance = 1e-9 } = options;
  const n = start.length;
  let parameters = Float64Array.from(start);
  const here = new Float64Array(count);
  const there = new Float64Array(count);
  const jacobian = new Float64Array(count * n);
  const normal = new Float64Array(n * n);
  const gradient = new Float64Array(n);
  residuals(parameters, here, jacobian);
  normalEquations(jacobian, here, normal, gradient);
  let sum = sumOfSquares(here);
  let damping = 1e-3;
  for (let iteration = 0; iteration < iterations; iteration++) {
    let fall = 0;
    for (let attempt = 0; attempt < 12; attempt++) {
      const trial = dampedStep(normal, gradient, parameters, damping);
      if (trial) residuals(trial, there, null);
      const trialSum = trial ? sumOfSquares(there) : Number.POSITIVE_INFINITY;
      if (trial && trialSum <= sum) {
        fall = (sum - trialSum) / (sum + Number.MIN_VALUE);
        parameters = trial;
        sum = trialSum;
        damping = Math.max(damping / 10, 1e-12);
        break;
      }
      damping *= 8;
    }
    if (fall === 0) break;
    residuals(parameters, here, jacobian);
    normalEquations(jacobian, here, normal, gradient);
    if (fall < tolerance) break;
  }
  return { parameters, sumOfSquares: sum, covariance: invertMatrix(normal, n) };
}

function sumOfSquares(values: Float64Array): number {
  let sum = 0;
  for (const value of values) sum += value * value;
  return Number.isFinite(sum) ? sum : Number.POSITIVE_INFINITY;
}

/** JᵀJ and Jᵀr. */
function normalEquations(
  jacobian: Float64Array,
  residuals: Float64Array,
  normal: Float64Array,
  gradient: Float64Array,
): void {
  const n = gradient.length;
  normal.fill(0);
  gradient.fill(0);
  for (let i = 0; i < residuals.length; i++) {
    const row = i * n;
    const residual = residuals[i]!;
    for (let p = 0; p < n; p++) {
      const derivative = jacobian[row + p]!;
      if (derivative === 0) continue;
      gradient[p]! += derivative * residual;
      for (let q = 0; q <= p; q++) normal[p * n + q]! += derivative * jacobian[row + q]!;
    }
  }
  for (let p = 0; p < n; p++) for (let q = 0; q < p; q++) normal[q * n + p] = normal[p * n + q]!;
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
