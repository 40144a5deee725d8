import type { Point } from '../image.ts';
import { leastSquares } from '../numeric/levenberg-marquardt.ts';
import { type LensMap, planeToImage } from './lens-map.ts';

/** A point of the plane and where it was seen. */
export interface Correspondence {
  readonly plane: Point;
  readonly image: Point;
  /** Where the plane point moves for one unit of `spread`, see FittedLensMap. Default nowhere. */
  readonly spreadAlong?: Point;
}

export interface FittedLensMap {
  readonly map: LensMap;
  /** Distance from the model, px, one a correspondence. */
  readonly distances: Float64Array;
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
  /** Expected error of a seen point, px: what the priors are weighed against. Default 1. */
  readonly pointError?: number;
  /** Rounds of Huber's re-weighting; 0 gives plain least squares. Default 4. */
  readonly robustRounds?: number;
  /** Default false. */
  readonly fitSpread?: boolean;
}

// Standard deviations expected of the parameters. They decide only what the points leave open. k1 covers 8 % at the corner more than
// twice (common practice for photographic lenses, no source); k2 and k3 are smaller, as a converging series asks.
const priorDeviations = { perspective: 0.3, radial: [0.2, 0.06, 0.03], spread: 0.1 };
const huber = 1.345; // 95 % efficient for normal errors: Huber, Robust Statistics (1981)
const spreadIndex = 11;

/**
 * Fits homography and radial distortion to correspondences by robust least squares.
 * @param start a map near the solution: the residuals should fall all the way from it
 */
export function fitLensMap(
  points: readonly Correspondence[],
  start: LensMap,
  options: FitOptions,
): FittedLensMap {
  const { planeScale, pointError = 1, robustRounds = 4, fitSpread = false } = options;
  const weights = new Float64Array(points.length).fill(1);
  const mapOf = (p: ArrayLike<number>) => mapFromParameters(p, start, planeScale);
  const priors = priorsOf(fitSpread);
  const residuals = (p: Float64Array, out: Float64Array) => {
    writeErrors(points, mapOf(p), p[spreadIndex] ?? 0, out);
    for (let i = 0; i < points.length; i++) {
      const scale = Math.sqrt(weights[i]!) / pointError;
      out[2 * i]! *= scale;
      out[2 * i + 1]! *= scale;
    }
    priors.forEach(({ index, deviation }, i) => {
      out[2 * points.length + i] = p[index]! / deviation;
    });
  };
  const first = parametersOf(start, planeScale, fitSpread);
  const steps = new Float64Array(first.length).fill(1e-6);
  const count = 2 * points.length + priors.length;
  let solution = leastSquares(residuals, first, count, { steps });
  let distances = distancesOf(points, mapOf(solution.parameters), solution.parameters);
  for (let round = 0; round < robustRounds; round++) {
    reweigh(weights, distances);
    solution = leastSquares(residuals, solution.parameters, count, { steps, iterations: 6 });
    distances = distancesOf(points, mapOf(solution.parameters), solution.parameters);
  }
  const { parameters, covariance } = solution;
  const variance = varianceFactor(weights, distances, pointError, first.length);
  return {
    map: mapOf(parameters),
    distances,
    spread: parameters[spreadIndex] ?? 0,
    uncertaintyOf(quantity) {
      if (!covariance) throw new RangeError('the points do not determine the map');
      const gradient = gradientOf((p) => quantity(mapOf(p)), parameters, steps);
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

function parametersOf(map: LensMap, planeScale: number, fitSpread: boolean): number[] {
  const h = map.homography;
  const scaled = [0, 1, 2, 3, 4, 5, 6, 7].map(
    (i) => (h[i]! / h[8]!) * (i % 3 === 2 ? 1 : planeScale),
  );
  return [...scaled, ...map.radial, ...(fitSpread ? [0] : [])];
}

function mapFromParameters(p: ArrayLike<number>, frame: LensMap, planeScale: number): LensMap {
  const homography = new Float64Array(9);
  for (let i = 0; i < 8; i++) homography[i] = p[i]! / (i % 3 === 2 ? 1 : planeScale);
  homography[8] = 1;
  const { width, height } = frame;
  return { width, height, homography, radial: [p[8]!, p[9]!, p[10]!] };
}

function writeErrors(
  points: readonly Correspondence[],
  map: LensMap,
  spread: number,
  out: Float64Array,
): void {
  for (let i = 0; i < points.length; i++) {
    const { plane, image, spreadAlong } = points[i]!;
    const x = plane.x + spread * (spreadAlong?.x ?? 0);
    const y = plane.y + spread * (spreadAlong?.y ?? 0);
    const model = planeToImage(map, x, y);
    out[2 * i] = model.x - image.x;
    out[2 * i + 1] = model.y - image.y;
  }
}

function distancesOf(
  points: readonly Correspondence[],
  map: LensMap,
  parameters: ArrayLike<number>,
): Float64Array {
  const errors = new Float64Array(2 * points.length);
  writeErrors(points, map, parameters[spreadIndex] ?? 0, errors);
  return Float64Array.from(points, (_, i) => Math.hypot(errors[2 * i]!, errors[2 * i + 1]!));
}

/** Huber's weights; the scale is the median distance over 1.1774, the median of a Rayleigh distribution. */
function reweigh(weights: Float64Array, distances: Float64Array): void {
  const median = Float64Array.from(distances).sort()[distances.length >> 1] ?? 0;
  const limit = Math.max((huber * Math.SQRT2 * median) / 1.1774, 1e-9);
  for (let i = 0; i < weights.length; i++) {
    weights[i] = distances[i]! <= limit ? 1 : limit / distances[i]!;
  }
}

function varianceFactor(
  weights: Float64Array,
  distances: Float64Array,
  pointError: number,
  parameterCount: number,
): number {
  let sum = 0;
  for (let i = 0; i < weights.length; i++) sum += weights[i]! * (distances[i]! / pointError) ** 2;
  const freedom = 2 * weights.length - parameterCount;
  // Too few points to judge their own scatter: the expected error stands.
  return freedom < 4 ? Math.max(1, sum) : sum / freedom;
}

function gradientOf(
  quantity: (parameters: Float64Array) => number,
  at: Float64Array,
  steps: Float64Array,
): number[] {
  return Array.from(at, (value, p) => {
    const moved = Float64Array.from(at);
    moved[p] = value + steps[p]!;
    const above = quantity(moved);
    moved[p] = value - steps[p]!;
    return (above - quantity(moved)) / (2 * steps[p]!);
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
