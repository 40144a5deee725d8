import type { Point } from '../image.ts';
import { leastSquares } from '../numeric/levenberg-marquardt.ts';
import { halfDiagonal, type LensMap } from './lens-map.ts';

/** A point of the plane and where it was seen. */
export interface Correspondence {
  readonly plane: Point;
  readonly image: Point;
  /** Unit vector in the image: only the distance along it counts, as for a point of a line. Default: both directions do. */
  readonly normal?: Point;
  /** Where the plane point moves for one unit of `spread`, see FittedLensMap. Default nowhere. */
  readonly spreadAlong?: Point;
}

export interface FittedLensMap {
  readonly map: LensMap;
  /**
   * How much larger the marks look than printed, as a share of `spreadAlong`: a tone curve taken wrongly shifts every edge towards
   * its dark or its light side and so grows or shrinks every mark about its own centre. 0 unless fitted.
   */
  readonly spread: number;
  /** Standard uncertainty of a function of the map, to first order, from the scatter of the points about the model. */
  uncertaintyOf(quantity: (map: LensMap) => number): number;
}

export interface FitOptions {
  /** Plane units that make about 1 in the fit: half the plane's extent. */
  readonly planeScale: number;
  /** Expected error of a seen point in a direction, px: what the priors are weighed against. Default 1. */
  readonly pointError?: number;
  /** Rounds of Huber's re-weighting; 0 gives plain least squares. Default 3. */
  readonly robustRounds?: number;
  /** Default false. */
  readonly fitSpread?: boolean;
}

// Standard deviations expected of the parameters. They decide only what the points leave open. k1 covers 8 % at the corner more than
// twice (common practice for photographic lenses, no source); k2 and k3 are smaller, as a converging series asks.
const priorDeviations = { perspective: 0.3, radial: [0.2, 0.06, 0.03], spread: 0.1 };
const huber = 1.345; // 95 % efficient for normal errors: Huber, Robust Statistics (1981)
const spreadIndex = 11; // after eight of the homography and three of the distortion

/**
 * Fits homography and radial distortion to correspondences by robust least squares.
 * @param start a map near the solution: the residuals should fall all the way from it
 */
export function fitLensMap(
  points: readonly Correspondence[],
  start: LensMap,
  options: FitOptions,
): FittedLensMap {
  const { planeScale, pointError = 1, robustRounds = 3, fitSpread = false } = options;
  const weights = new Float64Array(points.length).fill(1 / pointError);
  const priors = priorsOf(fitSpread);
  const unit = halfDiagonal(start);
  const n = spreadIndex + (fitSpread ? 1 : 0);
  const residuals = (p: Float64Array, out: Float64Array, jacobian: Float64Array | null) => {
    jacobian?.fill(0);
    for (let i = 0; i < points.length; i++) {
      writePoint(points[i]!, weights[i]!, i, p, out, jacobian, { start, unit, planeScale });
    }
    priors.forEach(({ index, deviation }, k) => {
      const i = 2 * points.length + k;
      out[i] = p[index]! / deviation;
      if (jacobian) jacobian[i * n + index] = 1 / deviation;
    });
  };
  const count = 2 * points.length + priors.length;
  const errors = new Float64Array(count);
  let solution = leastSquares(residuals, parametersOf(start, planeScale, n), count);
  for (let round = 0; round < robustRounds; round++) {
    weights.fill(1);
    residuals(solution.parameters, errors, null);
    reweigh(weights, errors, points, pointError);
    solution = leastSquares(residuals, solution.parameters, count, { iterations: 5 });
  }
  const { parameters, covariance } = solution;
  residuals(parameters, errors, null);
  const variance = varianceFactor(errors, points, n);
  const mapOf = (p: ArrayLike<number>) => mapFromParameters(p, start, planeScale);
  return {
    map: mapOf(parameters),
    spread: parameters[spreadIndex] ?? 0,
    uncertaintyOf(quantity) {
      if (!covariance) throw new RangeError('the points do not determine the map');
      const gradient = gradientOf((p) => quantity(mapOf(p)), parameters);
      return Math.sqrt(variance * quadraticForm(covariance, gradient));
    },
  };
}

function priorsOf(fitSpread: boolean) {
  const { perspective, radial, spread } = priorDeviations;
  const priors = [
    { index: 6, deviation: perspective },
    { index: 7, deviation: perspective },
    ...radial.map((deviation, i) => ({ index: 8 + i, deviation })),
  ];
  if (fitSpread) priors.push({ index: spreadIndex, deviation: spread });
  return priors;
}

function parametersOf(map: LensMap, planeScale: number, n: number): Float64Array {
  const parameters = new Float64Array(n);
  const h = map.homography;
  for (let i = 0; i < 8; i++) parameters[i] = (h[i]! / h[8]!) * (i % 3 === 2 ? 1 : planeScale);
  parameters.set(map.radial, 8);
  return parameters;
}

function mapFromParameters(p: ArrayLike<number>, frame: LensMap, planeScale: number): LensMap {
  const homography = new Float64Array(9);
  for (let i = 0; i < 8; i++) homography[i] = p[i]! / (i % 3 === 2 ? 1 : planeScale);
  homography[8] = 1;
  const { width, height } = frame;
  return { width, height, homography, radial: [p[8]!, p[9]!, p[10]!] };
}

interface Scaling {
  readonly start: LensMap;
  readonly unit: number;
  readonly planeScale: number;
}

/** The two residuals of a point, model less seen (of a line's point the second is 0), and their derivatives. */
function writePoint(
  point: Correspondence,
  weight: number,
  i: number,
  p: Float64Array,
  out: Float64Array,
  jacobian: Float64Array | null,
  { start, unit, planeScale }: Scaling,
): void {
  const { plane, image, normal, spreadAlong } = point;
  const spread = p[spreadIndex] ?? 0;
  const x = (plane.x + spread * (spreadAlong?.x ?? 0)) / planeScale;
  const y = (plane.y + spread * (spreadAlong?.y ?? 0)) / planeScale;
  const w = p[6]! * x + p[7]! * y + 1;
  const a = (p[0]! * x + p[1]! * y + p[2]!) / w;
  const b = (p[3]! * x + p[4]! * y + p[5]!) / w;
  const r2 = a * a + b * b;
  const factor = 1 + r2 * (p[8]! + r2 * (p[9]! + r2 * p[10]!));
  const errorX = start.width / 2 + unit * a * factor - image.x;
  const errorY = start.height / 2 + unit * b * factor - image.y;
  // Two directions in the image that count: both axes, or the normal alone.
  const nx = (normal?.x ?? 1) * weight;
  const ny = (normal?.y ?? 0) * weight;
  const my = normal ? 0 : weight;
  out[2 * i] = nx * errorX + ny * errorY;
  out[2 * i + 1] = my * errorY;
  if (!jacobian) return;
  const slope = 2 * (p[8]! + r2 * (2 * p[9]! + r2 * 3 * p[10]!));
  const aa = (unit * (factor + slope * a * a)) / w;
  const ab = (unit * slope * a * b) / w;
  const bb = (unit * (factor + slope * b * b)) / w;
  const n = p.length;
  for (let direction = 0; direction < 2; direction++) {
    const dx = direction === 0 ? nx : 0;
    const dy = direction === 0 ? ny : my;
    const da = dx * aa + dy * ab;
    const db = dx * ab + dy * bb;
    const at = (2 * i + direction) * n;
    const across = -(da * a + db * b);
    jacobian[at] = da * x;
    jacobian[at + 1] = da * y;
    jacobian[at + 2] = da;
    jacobian[at + 3] = db * x;
    jacobian[at + 4] = db * y;
    jacobian[at + 5] = db;
    jacobian[at + 6] = across * x;
    jacobian[at + 7] = across * y;
    const radial = unit * (dx * a + dy * b) * r2;
    jacobian[at + 8] = radial;
    jacobian[at + 9] = radial * r2;
    jacobian[at + 10] = radial * r2 * r2;
    if (n <= spreadIndex || !spreadAlong) continue;
    const alongA = p[0]! * spreadAlong.x + p[1]! * spreadAlong.y;
    const alongB = p[3]! * spreadAlong.x + p[4]! * spreadAlong.y;
    const alongW = p[6]! * spreadAlong.x + p[7]! * spreadAlong.y;
    jacobian[at + spreadIndex] = (da * alongA + db * alongB + across * alongW) / planeScale;
  }
}

/** Huber's weights, by the error of one direction as the median over all points shows it. */
function reweigh(
  weights: Float64Array,
  errors: Float64Array,
  points: readonly Correspondence[],
  pointError: number,
): void {
  // Medians of |error| in one direction and of the distance in two, for deviation 1: normal and Rayleigh distributions.
  const scaled = points.map(
    ({ normal }, i) => Math.hypot(errors[2 * i]!, errors[2 * i + 1]!) / (normal ? 0.6745 : 1.1774),
  );
  const deviation = scaled.toSorted((p, q) => p - q)[points.length >> 1]!;
  points.forEach(({ normal }, i) => {
    const distance = Math.hypot(errors[2 * i]!, errors[2 * i + 1]!);
    const limit = Math.max(huber * deviation * (normal ? 1 : Math.SQRT2), 1e-9);
    weights[i] = (distance <= limit ? 1 : Math.sqrt(limit / distance)) / pointError;
  });
}

function varianceFactor(
  errors: Float64Array,
  points: readonly Correspondence[],
  parameterCount: number,
): number {
  let sum = 0;
  let count = 0;
  for (let i = 0; i < points.length; i++) {
    sum += errors[2 * i]! ** 2 + errors[2 * i + 1]! ** 2;
    count += points[i]!.normal ? 1 : 2;
  }
  const freedom = count - parameterCount;
  // Too few points to judge their own scatter: the expected error stands.
  return freedom < 4 ? Math.max(1, sum) : sum / freedom;
}

function gradientOf(quantity: (parameters: Float64Array) => number, at: Float64Array): number[] {
  const step = 1e-6;
  return Array.from(at, (value, p) => {
    const moved = Float64Array.from(at);
    moved[p] = value + step;
    const above = quantity(moved);
    moved[p] = value - step;
    return (above - quantity(moved)) / (2 * step);
  });
}

function quadraticForm(matrix: Float64Array, vector: readonly number[]): number {
  const n = vector.length;
  let sum = 0;
  for (let p = 0; p < n; p++) {
    for (let q = 0; q < n; q++) sum += vector[p]! * matrix[p * n + q]! * vector[q]!;
  }
  return Math.max(0, sum);
}
