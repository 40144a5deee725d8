import { type LensMap, lensMapJacobian, planeToImage } from '../geometry/lens-map.ts';
import type { Frame, Point } from '../image.ts';
import { sampleLinearGreen } from './sample.ts';
import type { Target } from './target.ts';

export interface RefinedStation {
  readonly id: string;
  /** As printed, target units: from the top left of the unrotated square, clockwise. */
  readonly printed: readonly Point[];
  /** As found, image pixels. */
  readonly found: readonly Point[];
}

export interface RefineOptions {
  /** Half the profile across an edge, target units; caught are edges that the map misses by some two thirds of it. */
  readonly reachUnits: number;
  /** And at most so many pixels, where that is at least the blur. */
  readonly reachPixels: number;
  readonly passes: number;
}

// Along a side, in shares of its half length: the ends are left out, where blur rounds the corner.
const alongShare = 0.6;
const leastLines = 6;
// (pad − square) / (pad + square) in linear light is 0.6 as printed; flare and a flat tone curve may halve it.
const leastContrast = 0.2;

/**
 * The squares' corners, found as intersections of their sides. Each side is a line in the map's own coordinates, so that distortion bends
 * it as the map says; it is fitted to where profiles across it cross half way, by the area under them: unbiased for a symmetric
 * blur of any width, in linear light.
 */
export function refineCorners(
  frame: Frame,
  map: LensMap,
  target: Target,
  options: RefineOptions,
): RefinedStation[] {
  const stations: RefinedStation[] = [];
  for (const station of target.stations) {
    const printed = squareCorners(target, station);
    const found = refineSquare(frame, map, station, printed, options);
    if (found) stations.push({ id: station.id, printed, found });
  }
  return stations;
}

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

/** A side's displacement from the map along its normal, px: offset + slope · t, t from −1 to 1 along it. */
interface Side {
  readonly offset: number;
  readonly slope: number;
}

function refineSquare(
  frame: Frame,
  map: LensMap,
  centre: Point,
  printed: readonly Point[],
  options: RefineOptions,
): Point[] | null {
  const margin = 1;
  for (const corner of printed) {
    const { x, y } = planeToImage(map, corner.x, corner.y);
    const inside =
      x > margin && y > margin && x < frame.width - margin && y < frame.height - margin;
    if (!inside) return null;
  }
  const sides: Side[] = [];
  for (let i = 0; i < 4; i++) {
    const side = refineSide(frame, map, centre, printed[i]!, printed[(i + 1) % 4]!, options);
    if (!side) return null;
    sides.push(side);
  }
  return printed.map((corner, i) => {
    // Corner i ends side i − 1 (t = 1) and begins side i (t = −1).
    const before = sides[(i + 3) % 4]!;
    const after = sides[i]!;
    const n = imageNormal(map, corner, outward(centre, printed[(i + 3) % 4]!, corner));
    const m = imageNormal(map, corner, outward(centre, corner, printed[(i + 1) % 4]!));
    const d = before.offset + before.slope;
    const e = after.offset - after.slope;
    const determinant = n.x * m.y - n.y * m.x;
    const at = planeToImage(map, corner.x, corner.y);
    return {
      x: at.x + (d * m.y - e * n.y) / determinant,
      y: at.y + (n.x * e - m.x * d) / determinant,
    };
  });
}

/** Unit normal of the printed side from `from` to `to`, away from the square's centre. */
function outward(centre: Point, from: Point, to: Point): Point {
  const length = Math.hypot(to.x - from.x, to.y - from.y);
  const normal = { x: (to.y - from.y) / length, y: -(to.x - from.x) / length };
  const side = normal.x * (from.x - centre.x) + normal.y * (from.y - centre.y);
  return side > 0 ? normal : { x: -normal.x, y: -normal.y };
}

/** The image's unit normal to a side whose normal in the plane is given: normals map by the inverse transpose. */
function imageNormal(map: LensMap, at: Point, normal: Point): Point & { unitsPerPixel: number } {
  const [a, b, c, d] = lensMapJacobian(map, at.x, at.y);
  const determinant = a * d - b * c;
  const x = (d * normal.x - c * normal.y) / determinant;
  const y = (-b * normal.x + a * normal.y) / determinant;
  const length = Math.hypot(x, y);
  return { x: x / length, y: y / length, unitsPerPixel: length };
}

function refineSide(
  frame: Frame,
  map: LensMap,
  centre: Point,
  from: Point,
  to: Point,
  options: RefineOptions,
): Side | null {
  const middle = { x: (from.x + to.x) / 2, y: (from.y + to.y) / 2 };
  const normal = outward(centre, from, to);
  const { unitsPerPixel } = imageNormal(map, middle, normal);
  const start = planeToImage(map, from.x, from.y);
  const end = planeToImage(map, to.x, to.y);
  const length = Math.hypot(end.x - start.x, end.y - start.y);
  const lines = Math.max(10, Math.min(40, Math.round(length * alongShare)));
  const reach = Math.min(options.reachUnits / unitsPerPixel, options.reachPixels);
  // Levels are read between 12 and 18 units from the edge: clear of the blur, of the pad's rim and of the square's other sides.
  const profile = {
    reach,
    near: 12 / unitsPerPixel,
    far: 18 / unitsPerPixel,
  };
  let side: Side = { offset: 0, slope: 0 };
  for (let pass = 0; pass < options.passes; pass++) {
    const next = fitSide(frame, map, { from, to, normal, lines }, side, profile);
    if (!next) return null;
    side = next;
  }
  return side;
}

interface Profile {
  readonly reach: number;
  readonly near: number;
  readonly far: number;
}

function fitSide(
  frame: Frame,
  map: LensMap,
  edge: { from: Point; to: Point; normal: Point; lines: number },
  side: Side,
  profile: Profile,
): Side | null {
  const { from, to, normal, lines } = edge;
  const areas: number[] = [];
  const places: number[] = [];
  let dark = 0;
  let light = 0;
  for (let line = 0; line < lines; line++) {
    const t = alongShare * ((2 * line + 1) / lines - 1);
    const u = from.x + ((1 + t) / 2) * (to.x - from.x);
    const v = from.y + ((1 + t) / 2) * (to.y - from.y);
    const at = planeToImage(map, u, v);
    const n = imageNormal(map, { x: u, y: v }, normal);
    const d = side.offset + side.slope * t;
    const reading = readProfile(frame, at.x + d * n.x, at.y + d * n.y, n, profile);
    if (!reading) continue;
    dark += reading.dark;
    light += reading.light;
    areas.push(reading.mean);
    places.push(t);
  }
  if (areas.length < leastLines) return null;
  dark /= areas.length;
  light /= areas.length;
  if (!(light - dark > leastContrast * (light + dark))) return null;
  // With the edge in the middle the mean over the profile is half way; each pixel it lies farther out takes (light − dark) / 2 reach.
  const displacements = areas.map(
    (mean) => ((dark + light) / 2 - mean) * ((2 * profile.reach) / (light - dark)),
  );
  const fit = fitLine(places, displacements);
  return { offset: side.offset + fit.offset, slope: side.slope + fit.slope };
}

/** Mean over the profile, and the levels inside (dark) and outside (light). Null where it leaves the frame. */
function readProfile(frame: Frame, x: number, y: number, n: Point, profile: Profile) {
  const { reach, near, far } = profile;
  const samples = Math.max(8, Math.min(40, Math.ceil(4 * reach)));
  let sum = 0;
  for (let k = 0; k < samples; k++) {
    const s = reach * ((2 * k + 1) / samples - 1);
    sum += sampleLinearGreen(frame, x + s * n.x, y + s * n.y);
  }
  let dark = 0;
  let light = 0;
  const levelSamples = 3;
  for (let k = 0; k < levelSamples; k++) {
    const s = near + ((far - near) * (k + 0.5)) / levelSamples;
    dark += sampleLinearGreen(frame, x - s * n.x, y - s * n.y);
    light += sampleLinearGreen(frame, x + s * n.x, y + s * n.y);
  }
  const total = sum + dark + light;
  if (Number.isNaN(total)) return null;
  return { mean: sum / samples, dark: dark / levelSamples, light: light / levelSamples };
}

/** Straight line through (t, d), once more without the points farther than 3 σ. */
function fitLine(t: readonly number[], d: readonly number[]): Side {
  const first = leastSquaresLine(t, d, () => true);
  const errors = d.map((value, i) => value - first.offset - first.slope * t[i]!);
  const deviation = Math.sqrt(errors.reduce((sum, e) => sum + e * e, 0) / errors.length);
  return leastSquaresLine(t, d, (i) => Math.abs(errors[i]!) <= 3 * deviation);
}

function leastSquaresLine(
  t: readonly number[],
  d: readonly number[],
  keep: (i: number) => boolean,
): Side {
  let n = 0;
  let st = 0;
  let sd = 0;
  let stt = 0;
  let std = 0;
  for (let i = 0; i < t.length; i++) {
    if (!keep(i)) continue;
    n++;
    st += t[i]!;
    sd += d[i]!;
    stt += t[i]! * t[i]!;
    std += t[i]! * d[i]!;
  }
  const slope = (n * std - st * sd) / (n * stt - st * st);
  return { offset: (sd - slope * st) / n, slope };
}
