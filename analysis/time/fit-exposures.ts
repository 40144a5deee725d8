import { invertMatrix } from '../numeric/linear-solve.ts';

/** A grey as it came out in one frame. */
export interface GreyPoint {
  /** Reflectance as printed, times the light at the grey's place against the frame's centre. */
  readonly light: number;
  /** Luminance that came out, in the file's linear light, with its standard uncertainty. */
  readonly luminance: number;
  readonly uncertainty: number;
}

export interface ExposureFit {
  /** Exposure of each frame in stops against their mean. */
  readonly stops: readonly number[];
  /** Covariance of `stops`, row-major. */
  readonly covariance: readonly number[];
  /** Root mean square residual over what the greys' uncertainties let expect; far over 1 where the camera changed its curve. */
  readonly excess: number;
}

/** Stops of file luminance between the knots of the tone curve. */
const knotSpacing = 1;
/** How much the curve may bend, in stops from knot to knot: enough for any camera's curve. Our choice. */
const bend = 0.4;
/** What stays however many pixels: the greys' own shading, the light's uneven fall. Found by rendering. */
const floorStops = 0.003;
/** Residuals beyond this many deviations count less (Huber): a glint on one grey must not move its frame. */
const huber = 2.5;

/**
 * How much more light fell on one frame than on another, by equal codes.
 *
 * In each frame the greys tell which reflectance gives which code. The camera's curve is the same in all frames, so that the
 * reflectances that gave one and the same code in two frames stand to each other inversely as the exposures: a null method. It is
 * done for all frames and codes at once, by least squares: log2(light) + exposure of the frame = G(log2 luminance), with G a smooth
 * curve and every frame's exposure unknown. The frames' exposure times don't come in here. A curve fitted to them would take up the
 * very error that is looked for.
 * @param frames two and more, chained by overlapping ranges of luminance
 */
export function fitExposures(frames: readonly (readonly GreyPoint[])[]): ExposureFit | null {
  const points = frames.flatMap((greys, frame) =>
    greys.map(({ light, luminance, uncertainty }) => ({
      frame,
      at: Math.log2(luminance),
      value: Math.log2(light),
      sigma: uncertainty / luminance / Math.LN2,
    })),
  );
  const basis = createBasis(points.map(({ at }) => at));
  let slope: (at: number) => number = () => 1;
  let weightOf: (residual: number) => number = () => 1;
  let solution: Solution | null = null;
  for (let round = 0; round < 5; round++) {
    const sigmas = points.map((p) => Math.hypot(p.sigma * slope(p.at), floorStops));
    const earlier: Solution | null = solution;
    const rows: Row[] = points.map((p, i) => {
      const spline = basis.at(p.at);
      const weight = earlier ? weightOf(residualOf(earlier, basis, p) / sigmas[i]!) : 1;
      return { ...p, spline, sigma: sigmas[i]! / Math.sqrt(weight) };
    });
    solution = solve(rows, frames.length, basis);
    if (!solution) return null;
    const { curve } = solution;
    slope = (at) =>
      Math.max(0.1, (basis.value(curve, at + 0.1) - basis.value(curve, at - 0.1)) / 0.2);
    weightOf = (residual) => Math.min(1, huber / Math.max(1e-9, Math.abs(residual)));
  }
  return (
    solution && { stops: solution.stops, covariance: solution.covariance, excess: solution.excess }
  );
}

interface Point {
  frame: number;
  at: number;
  value: number;
  sigma: number;
}

interface Row extends Point {
  spline: { first: number; weights: readonly number[] };
}

interface Solution extends ExposureFit {
  readonly curve: readonly number[];
}

interface Basis {
  readonly count: number;
  at(x: number): { first: number; weights: readonly number[] };
  value(curve: readonly number[], x: number): number;
}

/** Uniform cubic B-splines over the range of the points. */
function createBasis(places: readonly number[]): Basis {
  const low = Math.min(...places);
  const cells = Math.max(1, Math.ceil((Math.max(...places) - low) / knotSpacing));
  const at = (x: number) => {
    const along = (x - low) / knotSpacing;
    const first = Math.min(cells - 1, Math.max(0, Math.floor(along)));
    const t = along - first;
    const weights = [
      (1 - t) ** 3 / 6,
      (3 * t ** 3 - 6 * t ** 2 + 4) / 6,
      (-3 * t ** 3 + 3 * t ** 2 + 3 * t + 1) / 6,
      t ** 3 / 6,
    ];
    return { first, weights };
  };
  return {
    count: cells + 3,
    at,
    value: (curve, x) => {
      const { first, weights } = at(x);
      return weights.reduce((sum, w, i) => sum + w * curve[first + i]!, 0);
    },
  };
}

function residualOf(solution: Solution, basis: Basis, { frame, at, value }: Point): number {
  return value + solution.stops[frame]! - basis.value(solution.curve, at);
}

/** Unknowns: the curve's coefficients, then each frame's exposure, whose mean is held at zero. */
function solve(rows: readonly Row[], frames: number, basis: Basis): Solution | null {
  const n = basis.count + frames;
  const normal = new Float64Array(n * n);
  const right = new Float64Array(n);
  const add = (places: readonly number[], weights: readonly number[], y: number, w: number) => {
    places.forEach((i, a) => {
      right[i]! += w * weights[a]! * y;
      places.forEach((j, b) => {
        normal[i * n + j]! += w * weights[a]! * weights[b]!;
      });
    });
  };
  for (const { frame, value, spline, sigma } of rows) {
    const places = [0, 1, 2, 3].map((i) => spline.first + i);
    add([...places, basis.count + frame], [...spline.weights, -1], value, 1 / sigma ** 2);
  }
  for (let k = 1; k + 1 < basis.count; k++) add([k - 1, k, k + 1], [1, -2, 1], 0, 1 / bend ** 2);
  const all = Array.from({ length: frames }, (_, i) => basis.count + i);
  add(
    all,
    all.map(() => 1),
    0,
    1e8,
  );
  const inverse = invertMatrix(normal, n);
  if (!inverse) return null;
  const unknowns = Array.from({ length: n }, (_, i) =>
    right.reduce((sum, value, j) => sum + inverse[i * n + j]! * value, 0),
  );
  const curve = unknowns.slice(0, basis.count);
  const stops = unknowns.slice(basis.count);
  const partial = { curve, stops, covariance: [], excess: 1 };
  const squares = rows.reduce(
    (sum, row) => sum + (residualOf(partial, basis, row) / row.sigma) ** 2,
    0,
  );
  const freedom = Math.max(1, rows.length - n + 1);
  const excess = Math.sqrt(squares / freedom);
  const scale = Math.max(1, excess) ** 2;
  const covariance = all.flatMap((i) => all.map((j) => scale * inverse[i * n + j]!));
  return { curve, stops, covariance, excess };
}
