import type { Correspondence } from '../geometry/fit-lens-map.ts';
import { type LensMap, planeToImage } from '../geometry/lens-map.ts';
import type { Frame, Point } from '../image.ts';
import {
  alongShare,
  type Effort,
  imageNormal,
  pointOnSide,
  refineSide,
  type SideShift,
  shiftedPoint,
} from './refine-side.ts';
import type { Target } from './target.ts';

export interface RefinedStation {
  readonly id: string;
  /** As printed, target units: from the top left of the unrotated square, clockwise. */
  readonly printed: readonly Point[];
  /** As found, image pixels. */
  readonly found: readonly Point[];
  /** Two points of each side as found: what the corners are made of, with errors that are independent, unlike the corners' own. */
  readonly sidePoints: readonly Correspondence[];
}

// Where along a side, as t, a fitted line's errors at two places are independent: the deviation of t over the part that is read.
const independentPlace = alongShare / Math.sqrt(3);

/**
 * The squares' corners, found as intersections of their sides, in the stations whose square lies wholly in the frame.
 * @param map good to ten target units
 */
export function refineCorners(
  frame: Frame,
  map: LensMap,
  target: Target,
  effort: Effort,
): RefinedStation[] {
  const stations: RefinedStation[] = [];
  for (const station of target.stations) {
    const printed = squareCorners(target, station);
    if (!printed.every((corner) => isInside(frame, planeToImage(map, corner.x, corner.y))))
      continue;
    const square = refineSquare(frame, map, station, printed, effort);
    if (square) stations.push({ id: station.id, printed, ...square });
  }
  return stations;
}

/** The corners of a station's square as printed: from the top left of the unrotated square, clockwise. */
export function squareCorners(target: Target, centre: Point): Point[] {
  const half = target.station.squareSide / 2;
  const angle = (target.station.rotationDegrees * Math.PI) / 180;
  const cos = Math.cos(angle) * half;
  const sin = Math.sin(angle) * half;
  return [
    [-1, -1],
    [1, -1],
    [1, 1],
    [-1, 1],
  ].map(([x, y]) => ({
    x: centre.x + x! * cos - y! * sin,
    y: centre.y + x! * sin + y! * cos,
  }));
}

function isInside(frame: Frame, { x, y }: Point): boolean {
  return x > 1 && y > 1 && x < frame.width - 1 && y < frame.height - 1;
}

function refineSquare(
  frame: Frame,
  map: LensMap,
  centre: Point,
  printed: readonly Point[],
  effort: Effort,
): Pick<RefinedStation, 'found' | 'sidePoints'> | null {
  const normals: Point[] = [];
  const shifts: SideShift[] = [];
  for (let i = 0; i < 4; i++) {
    const from = printed[i]!;
    const to = printed[(i + 1) % 4]!;
    const normal = outward(centre, from, to);
    const shift = refineSide(frame, map, { from, to, normal }, effort);
    if (!shift) return null;
    normals.push(normal);
    shifts.push(shift);
  }
  const found = printed.map((corner, i) => {
    // Corner i ends the side before it, t = 1, and begins its own, t = −1.
    const before = (i + 3) % 4;
    const n = imageNormal(map, corner, normals[before]!);
    const m = imageNormal(map, corner, normals[i]!);
    const d = shifts[before]!.offset + shifts[before]!.slope;
    const e = shifts[i]!.offset - shifts[i]!.slope;
    const determinant = n.x * m.y - n.y * m.x;
    const at = planeToImage(map, corner.x, corner.y);
    return {
      x: at.x + (d * m.y - e * n.y) / determinant,
      y: at.y + (n.x * e - m.x * d) / determinant,
    };
  });
  const sidePoints = shifts.flatMap((shift, i) => {
    const side = { from: printed[i]!, to: printed[(i + 1) % 4]!, normal: normals[i]! };
    return [-independentPlace, independentPlace].map((t) => {
      const plane = pointOnSide(side, t);
      const spreadAlong = { x: plane.x - centre.x, y: plane.y - centre.y };
      const { x, y, normal } = shiftedPoint(map, side, shift, t);
      return { plane, image: { x, y }, normal, spreadAlong };
    });
  });
  return { found, sidePoints };
}

/** Unit normal of the printed side from `from` to `to`, away from the square's centre. */
function outward(centre: Point, from: Point, to: Point): Point {
  const length = Math.hypot(to.x - from.x, to.y - from.y);
  const normal = { x: (to.y - from.y) / length, y: -(to.x - from.x) / length };
  const side = normal.x * (from.x - centre.x) + normal.y * (from.y - centre.y);
  return side > 0 ? normal : { x: -normal.x, y: -normal.y };
}
