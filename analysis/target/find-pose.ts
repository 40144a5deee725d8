import { fitLensMap } from '../geometry/fit-lens-map.ts';
import { halfDiagonal, type LensMap, lensMapJacobian, planeToImage } from '../geometry/lens-map.ts';
import type { Plane, Point } from '../image.ts';
import type { StationCandidate } from './find-stations.ts';
import { matchStations, type StationMatch } from './match-stations.ts';
import { samplePlane } from './sample.ts';
import type { Target } from './target.ts';

/** The target's place in a plane of codes, good to about half a pixel of the plane. */
export interface Pose {
  readonly target: Target;
  readonly map: LensMap;
  readonly stationCount: number;
  /** Root mean square distance of the stations from the model, target units. */
  readonly misfit: number;
  /** Correlation of the discs' codes with the printed ones; 1 is perfect, and the target turned by 180° gives less than 0. */
  readonly discAgreement: number;
}

const guesses = 6; // a shape: the right one is the first but for clutter
const leastStations = 5;
const leastDiscs = 8;
const fit = { planeScale: 450, pointError: 0.5, robustRounds: 1 };
// Real targets give 0.9 and more, down to 23 dB and with one third of the discs out of the frame; chance pictures stay below 0.6.
export const leastAgreement = 0.75;

/** The best pose over all shapes, or null where nothing comes near. */
export function findPose(
  plane: Plane,
  candidates: readonly StationCandidate[],
  shapes: readonly Target[],
): Pose | null {
  const matches = shapes.flatMap((target) => matchStations(candidates, target, guesses));
  matches.sort((p, q) => q.score - p.score);
  let best: Pose | null = null;
  for (const match of matches) {
    const pose = poseFromMatch(plane, candidates, match);
    if (pose && (!best || rank(pose) > rank(best))) best = pose;
    if (best && isCertain(best)) break;
  }
  return best;
}

function rank(pose: Pose): number {
  return pose.stationCount + 10 * pose.discAgreement - pose.misfit;
}

/** So good that no other match can be better: the wrong shape, stretched to fit, misses by 1.7 units and more, the right one by 0.3. */
export function isCertain(pose: Pose): boolean {
  return pose.stationCount >= 9 && pose.discAgreement > 0.9 && pose.misfit < 0.8;
}

function poseFromMatch(
  plane: Plane,
  candidates: readonly StationCandidate[],
  match: StationMatch,
): Pose | null {
  const { target } = match;
  let map = startMap(plane, match);
  let assigned: ArrayLike<number> = match.assigned;
  for (const tolerance of [30, 14]) {
    const points = correspondences(candidates, assigned, target);
    if (points.length < leastStations) return null;
    map = fitLensMap(points, map, fit).map;
    assigned = reassign(candidates, map, target, tolerance);
  }
  const points = correspondences(candidates, assigned, target);
  if (points.length < leastStations) return null;
  map = fitLensMap(points, map, fit).map;
  if (!isPlausible(map, target)) return null;
  const misfit = misfitOf(map, points);
  const turned = turnHalf(map);
  const upright = discAgreement(plane, map, target);
  const upsideDown = discAgreement(plane, turned, target);
  const shared = { target, stationCount: points.length, misfit };
  return upright >= upsideDown
    ? { ...shared, map, discAgreement: upright }
    : { ...shared, map: turned, discAgreement: upsideDown };
}

/** Root mean square distance of the stations from the model, target units. */
function misfitOf(map: LensMap, points: readonly { plane: Point; image: Point }[]): number {
  let sum = 0;
  for (const { plane, image } of points) {
    const model = planeToImage(map, plane.x, plane.y);
    const distance = Math.hypot(model.x - image.x, model.y - image.y);
    sum += (distance / localScale(map, plane)) ** 2;
  }
  return Math.sqrt(sum / points.length);
}

function startMap(plane: Plane, match: StationMatch): LensMap {
  const { width, height } = plane;
  const unit = halfDiagonal(plane);
  const a = match.a / unit;
  const b = match.b / unit;
  const x = (match.x - width / 2) / unit;
  const y = (match.y - height / 2) / unit;
  return { width, height, homography: [a, -b, x, b, a, y, 0, 0, 1], radial: [0, 0, 0] };
}

function correspondences(
  candidates: readonly StationCandidate[],
  assigned: ArrayLike<number>,
  target: Target,
) {
  const points: { plane: Point; image: Point }[] = [];
  target.stations.forEach((station, s) => {
    const candidate = candidates[assigned[s]!];
    if (candidate) points.push({ plane: station, image: candidate });
  });
  return points;
}

function reassign(
  candidates: readonly StationCandidate[],
  map: LensMap,
  target: Target,
  tolerance: number,
): number[] {
  return target.stations.map((station) => {
    const predicted = planeToImage(map, station.x, station.y);
    let found = -1;
    let nearest = tolerance * localScale(map, station);
    candidates.forEach((candidate, c) => {
      const distance = Math.hypot(candidate.x - predicted.x, candidate.y - predicted.y);
      if (distance < nearest) {
        nearest = distance;
        found = c;
      }
    });
    return found;
  });
}

function localScale(map: LensMap, at: Point): number {
  const [a, b, c, d] = lensMapJacobian(map, at.x, at.y);
  return Math.sqrt(Math.abs(a * d - b * c));
}

/** No mirror image, no fold, and a perspective that a camera before a sheet can have. */
function isPlausible(map: LensMap, target: Target): boolean {
  const x = target.width / 2;
  const y = target.height / 2;
  let least = Number.POSITIVE_INFINITY;
  let most = 0;
  for (const [u, v] of [
    [0, 0],
    [-x, -y],
    [x, -y],
    [x, y],
    [-x, y],
  ] as const) {
    const [a, b, c, d] = lensMapJacobian(map, u, v);
    const determinant = a * d - b * c;
    if (!(determinant > 0)) return false;
    least = Math.min(least, determinant);
    most = Math.max(most, determinant);
  }
  return most < 9 * least;
}

function turnHalf(map: LensMap): LensMap {
  const turned = Float64Array.from(map.homography, (value, i) => (i % 3 === 2 ? value : -value));
  return { ...map, homography: turned };
}

/** Pearson's correlation between the green codes of the discs in the frame and the printed ones; −1 when too few are in it. */
function discAgreement(plane: Plane, map: LensMap, target: Target): number {
  const seen: number[] = [];
  const printed: number[] = [];
  for (const disc of target.discs) {
    const at = planeToImage(map, disc.x, disc.y);
    const code = samplePlane(plane, at.x, at.y);
    if (Number.isNaN(code)) continue;
    seen.push(code);
    printed.push(disc.srgb8[1]!);
  }
  return seen.length < leastDiscs ? -1 : correlation(seen, printed);
}

function correlation(x: readonly number[], y: readonly number[]): number {
  const meanX = x.reduce((sum, value) => sum + value, 0) / x.length;
  const meanY = y.reduce((sum, value) => sum + value, 0) / y.length;
  let xx = 0;
  let yy = 0;
  let xy = 0;
  for (let i = 0; i < x.length; i++) {
    xx += (x[i]! - meanX) ** 2;
    yy += (y[i]! - meanY) ** 2;
    xy += (x[i]! - meanX) * (y[i]! - meanY);
  }
  return xx > 0 && yy > 0 ? xy / Math.sqrt(xx * yy) : 0;
}
