import { MeasurementError } from '../errors.ts';
import { type Correspondence, type FittedLensMap, fitLensMap } from '../geometry/fit-lens-map.ts';
import { applyHomography } from '../geometry/homography.ts';
import {
  halfDiagonal,
  imageToPlane,
  inverseOf,
  type LensMap,
  lensMapJacobian,
  planeToImage,
} from '../geometry/lens-map.ts';
import { polygonAreaInFrame } from '../geometry/polygon.ts';
import { radialFactor } from '../geometry/radial.ts';
import type { Frame, Point } from '../image.ts';
import { findPose, isCertain, leastAgreement, type Pose } from './find-pose.ts';
import { findStations } from './find-stations.ts';
import { reduceGreen } from './reduce.ts';
import { type RefinedStation, refineCorners } from './refine-corners.ts';
import { refineRings } from './refine-rings.ts';
import type { Effort } from './refine-side.ts';
import type { Registration } from './registration.ts';
import { type Target, targets } from './target.ts';

export interface RegisterOptions {
  /** Which shape to look for. Default auto: whichever fits. */
  readonly target?: 'auto' | '4x3' | '3x2';
}

const reducedSide = 450; // the smallest at which a square spans ten pixels when the target fills 60 % of a 3:2 frame's height
const leastSquares = 5;
// Target units. The right shape stays below 0.9 in VGA at σ 2.5 px and 23 dB; the other one, stretched to fit, has 2 and more.
const mostResidual = 1.5;

/**
 * Finds the printed target in a frame: a smooth map between target units and pixels (homography and radial distortion about the
 * frame's centre), refined on the squares' corners and the rings in linear green light.
 * Takes any rotation, tilt and distortion, and a target that is cut off as long as five stations and eight discs are in the frame.
 * @throws MeasurementError `target-not-found` with what was seen and what to do
 */
export function registerTarget(frame: Frame, options: RegisterOptions = {}): Registration {
  const { target = 'auto' } = options;
  const shapes = target === 'auto' ? Object.values(targets) : [targets[target]];
  const plane = reduceGreen(frame, reducedSide);
  let candidates = findStations(plane, 'large');
  let pose = findPose(plane, candidates, shapes);
  if (!pose || !isCertain(pose)) {
    candidates = findStations(plane, 'all');
    pose = findPose(plane, candidates, shapes);
  }
  if (!pose || pose.discAgreement < leastAgreement) throw notFound(candidates.length, pose);
  return registerFrom(frame, pose.target, enlargeMap(pose.map, frame, plane.factor));
}

const roughly: Effort = { reachUnits: 14, passes: 2, mostLines: 20 };
const finely: Effort = { reachUnits: 7, passes: 3, mostLines: 64 };

/** Refines a rough map, good to some eight target units, to a registration. */
function registerFrom(frame: Frame, target: Target, rough: LensMap): Registration {
  const first = refineCorners(frame, rough, target, roughly);
  if (first.length < leastSquares) throw tooFewSquares(first.length, target);
  const coarse = fitTo(first, [], target, rough);
  const stations = refineCorners(frame, coarse.map, target, finely);
  if (stations.length < leastSquares) throw tooFewSquares(stations.length, target);
  const rings = refineRings(frame, coarse.map, target);
  const fitted = fitTo(stations, rings, target, coarse.map);
  const registration = registrationOf(frame, target, fitted, stations);
  const [a, b, c, d] = registration.jacobian(0, 0);
  const residual = registration.summary.residual / Math.sqrt(Math.abs(a * d - b * c));
  if (!(residual < mostResidual)) throw misshapen(residual, target);
  return registration;
}

function fitTo(
  stations: readonly RefinedStation[],
  rings: readonly { printed: Point; found: Point }[],
  target: Target,
  start: LensMap,
): FittedLensMap {
  const points: Correspondence[] = stations.flatMap(({ sidePoints }) => sidePoints);
  for (const { printed, found } of rings) points.push({ plane: printed, image: found });
  return fitLensMap(points, start, {
    planeScale: target.height / 2,
    pointError: 0.1,
    fitSpread: true,
  });
}

function registrationOf(
  frame: Frame,
  target: Target,
  fitted: FittedLensMap,
  stations: readonly RefinedStation[],
): Registration {
  const { map } = fitted;
  const inverse = inverseOf(map);
  const distances = cornerDistances(target, fitted, stations);
  const good = stations.filter((_, s) => !isMisplaced(distances, s));
  const goodDistances = distances.filter((_, s) => !isMisplaced(distances, s));
  const corners = new Map(good.map(({ id, found }) => [id, found]));
  const [a, , c] = lensMapJacobian(map, 0, 0);
  return {
    target,
    summary: {
      target: target.name,
      residual: rootMeanSquare(goodDistances.flat()),
      rotation: (Math.atan2(c, a) * 180) / Math.PI,
      coverage: polygonAreaInFrame(outline(map, target), frame) / (frame.width * frame.height),
      rings: Object.fromEntries(
        target.rings.map((ring) => {
          const { x, y } = planeToImage(map, ring.x, ring.y);
          return [ring.id, [x, y]];
        }),
      ),
    },
    toImage: (x, y) => planeToImage(map, x, y),
    toTarget: (x, y) => imageToPlane(map, inverse, x, y),
    jacobian: (x, y) => lensMapJacobian(map, x, y),
    corners,
    distortion: {
      corner: cornerDistortion(map, target),
      uncertainty: fitted.uncertaintyOf((m) => cornerDistortion(m, target)),
    },
  };
}

/** Of each station, how far its corners lie from the model, px. */
function cornerDistances(
  target: Target,
  { map, spread }: FittedLensMap,
  stations: readonly RefinedStation[],
): number[][] {
  return stations.map(({ id, printed, found }) => {
    const centre = target.stations.find((station) => station.id === id)!;
    return printed.map((corner, i) => {
      const grown = 1 + spread;
      const model = planeToImage(
        map,
        centre.x + grown * (corner.x - centre.x),
        centre.y + grown * (corner.y - centre.y),
      );
      return Math.hypot(model.x - found[i]!.x, model.y - found[i]!.y);
    });
  });
}

/** A square whose corners lie far from where all the others put them: something lies on it. */
function isMisplaced(distances: readonly number[][], s: number): boolean {
  const all = distances.flat().sort((p, q) => p - q);
  const median = all[all.length >> 1]!;
  return distances[s]!.some((distance) => distance > 2 + 8 * median);
}

/** Mean over the field's four corners of 100 (H′ − H)/H, H the image height without distortion. */
function cornerDistortion(map: LensMap, target: Target): number {
  let sum = 0;
  for (const [x, y] of fieldCorners(target)) {
    const ideal = applyHomography(map.homography, x, y);
    sum += 100 * (radialFactor(map.radial, ideal.x ** 2 + ideal.y ** 2) - 1);
  }
  return sum / 4;
}

function fieldCorners({ width, height }: Target): [number, number][] {
  return [
    [-width / 2, -height / 2],
    [width / 2, -height / 2],
    [width / 2, height / 2],
    [-width / 2, height / 2],
  ];
}

/** The field's border as seen, a polygon. */
function outline(map: LensMap, target: Target): Point[] {
  const corners = fieldCorners(target);
  const perSide = 12;
  return corners.flatMap(([x, y], i) => {
    const [nextX, nextY] = corners[(i + 1) % 4]!;
    return Array.from({ length: perSide }, (_, k) =>
      planeToImage(map, x + ((nextX - x) * k) / perSide, y + ((nextY - y) * k) / perSide),
    );
  });
}

function enlargeMap(map: LensMap, frame: Frame, factor: number): LensMap {
  const { width, height } = frame;
  const scale = (factor * halfDiagonal(map)) / halfDiagonal(frame);
  // The plane may leave out the frame's last few columns and rows, so that its centre is not quite the frame's.
  const dx = (factor * map.width - width) / 2 / halfDiagonal(frame);
  const dy = (factor * map.height - height) / 2 / halfDiagonal(frame);
  const h = map.homography;
  const homography = Float64Array.from(h);
  for (let i = 0; i < 3; i++) {
    homography[i] = scale * h[i]! + dx * h[6 + i]!;
    homography[3 + i] = scale * h[3 + i]! + dy * h[6 + i]!;
  }
  return { width, height, homography, radial: map.radial };
}

function rootMeanSquare(values: readonly number[]): number {
  return Math.sqrt(values.reduce((sum, value) => sum + value * value, 0) / values.length);
}

function notFound(candidateCount: number, pose: Pose | null): MeasurementError {
  let seen = `${candidateCount} marks like its squares were seen, but not in their pattern`;
  if (candidateCount === 0) seen = 'none of its thirteen squares was seen';
  if (candidateCount === 1) seen = 'only one mark like its thirteen squares was seen';
  if (pose) seen = 'squares were seen in its pattern, but not the discs between them';
  return new MeasurementError(
    'target-not-found',
    `The target was not found: ${seen}. Photograph the whole target, sharp, evenly lit and filling at least 60 % of the picture's height, or place the rings by hand.`,
  );
}

function tooFewSquares(count: number, target: Target): MeasurementError {
  return new MeasurementError(
    'target-not-found',
    `Something like the ${target.name} target was seen, but only ${count} of its thirteen squares have clear edges; at least ${leastSquares} are needed. Check focus and exposure and that nothing lies on the target.`,
  );
}

function misshapen(residual: number, target: Target): MeasurementError {
  return new MeasurementError(
    'target-not-found',
    `Something like the ${target.name} target was seen, but its squares lie ${residual.toFixed(1)} units from their places where at most ${mostResidual} is allowed. Lay the print flat and check which shape it is.`,
  );
}
