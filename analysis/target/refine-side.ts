import { type LensMap, lensMapJacobian, planeToImage } from '../geometry/lens-map.ts';
import type { Frame, Point } from '../image.ts';
import { sampleLinearGreen } from './sample.ts';

/** A side of a printed square: its ends in the plane, and the plane's unit normal, dark to light. */
export interface PrintedSide {
  readonly from: Point;
  readonly to: Point;
  readonly normal: Point;
}

/** How far the image of a side lies from where the map puts it, px along its normal: offset + slope · t, t from −1 to 1 along it. */
export interface SideShift {
  readonly offset: number;
  readonly slope: number;
}

// Along a side, in shares of its half length: the ends are left out, where blur rounds the corner.
export const alongShare = 0.65;
// Target units to either side of the edge between which its two levels are read: clear of most blur, of the pad's rim and of the
// square's other sides.
const levelsFrom = 12;
const levelsTo = 18;
const leastLines = 6;
// (pad − square) / (pad + square) in linear light is 0.6 as printed; flare and a flat tone curve may halve it.
const leastContrast = 0.2;
const mostSamples = 48;
// The passes before the last only bring the profile near: so many lines are enough for that.
const nearingLines = 24;

/** How much reading a side is worth. */
export interface Effort {
  /** Half the first profile's length, target units: edges up to two thirds of it away are caught. */
  readonly reachUnits: number;
  readonly passes: number;
  readonly mostLines: number;
}

/**
 * Fits a side to where profiles across it cross half way, by the mean over the profile: unbiased in linear light for a symmetric
 * blur of any width. The line lives in the map's own coordinates, so that distortion bends it as the map says. Passes follow each other with the
 * profile centred anew and cut to the edge's width, which keeps noise out.
 * @returns null where the side isn't there or leaves the frame
 */
export function refineSide(
  frame: Frame,
  map: LensMap,
  side: PrintedSide,
  { reachUnits, passes, mostLines }: Effort,
): SideShift | null {
  const middle = { x: (side.from.x + side.to.x) / 2, y: (side.from.y + side.to.y) / 2 };
  const { unitsPerPixel } = imageNormal(map, middle, side.normal);
  const start = planeToImage(map, side.from.x, side.from.y);
  const end = planeToImage(map, side.to.x, side.to.y);
  const length = Math.hypot(end.x - start.x, end.y - start.y);
  const lines = Math.max(10, Math.min(mostLines, Math.round(length * alongShare)));
  const widest = reachUnits / unitsPerPixel;
  let reach = widest;
  let shift: SideShift = { offset: 0, slope: 0 };
  for (let pass = 0; pass < passes; pass++) {
    const read = pass < passes - 1 ? Math.min(lines, nearingLines) : lines;
    const fit = fitPass(frame, map, side, shift, { lines: read, reach, unitsPerPixel });
    if (!fit) return null;
    shift = { offset: shift.offset + fit.offset, slope: shift.slope + fit.slope };
    // 2.2 σ to either side hold 97 % of a Gaussian blur; what is cut off is cut off alike on both.
    reach = Math.min(widest, Math.max(1.5, 2.2 * fit.deviation + 0.5));
  }
  return shift;
}

/** The point at t, from −1 to 1, along a side. */
export function pointOnSide({ from, to }: PrintedSide, t: number): Point {
  return {
    x: from.x + ((1 + t) / 2) * (to.x - from.x),
    y: from.y + ((1 + t) / 2) * (to.y - from.y),
  };
}

/** Where the point at t of a side is seen, and the side's normal there. */
export function shiftedPoint(
  map: LensMap,
  side: PrintedSide,
  shift: SideShift,
  t: number,
): Point & { normal: Point } {
  const plane = pointOnSide(side, t);
  const at = planeToImage(map, plane.x, plane.y);
  const normal = imageNormal(map, plane, side.normal);
  const d = shift.offset + shift.slope * t;
  return { x: at.x + d * normal.x, y: at.y + d * normal.y, normal };
}

interface Pass {
  readonly lines: number;
  readonly reach: number;
  readonly unitsPerPixel: number;
}

function fitPass(
  frame: Frame,
  map: LensMap,
  side: PrintedSide,
  shift: SideShift,
  { lines, reach, unitsPerPixel }: Pass,
) {
  const samples = Math.max(8, Math.min(mostSamples, Math.ceil(4 * reach)));
  const profile = new Float64Array(samples);
  const whole = new Float64Array(samples);
  const means: number[] = [];
  const places: number[] = [];
  let dark = 0;
  let light = 0;
  for (let line = 0; line < lines; line++) {
    const t = alongShare * ((2 * line + 1) / lines - 1);
    const { x, y, normal: n } = shiftedPoint(map, side, shift, t);
    const mean = readProfile(frame, x, y, n, reach, profile);
    const inner = readLevel(frame, x, y, n, -1 / unitsPerPixel);
    const outer = readLevel(frame, x, y, n, 1 / unitsPerPixel);
    if (Number.isNaN(mean + inner + outer)) continue;
    for (let k = 0; k < samples; k++) whole[k]! += profile[k]!;
    means.push(mean);
    places.push(t);
    dark += inner;
    light += outer;
  }
  const count = means.length;
  if (count < leastLines) return null;
  dark /= count;
  light /= count;
  if (!(light - dark > leastContrast * (light + dark))) return null;
  // With the edge in the middle the mean over the profile is half way; each pixel farther out takes (light − dark) / (2 reach) off.
  const level = (dark + light) / 2;
  const perPixel = (light - dark) / (2 * reach);
  const line = fitLine(
    places,
    means.map((mean) => (level - mean) / perPixel),
  );
  return { ...line, deviation: blurDeviation(whole, count, dark, light, reach) };
}

/**
 * Deviation of the Gaussian blur that the mean profile shows: ∫ 1 − |2 (I − level) / (light − dark)| is 2 σ √(2/π) for an error
 * function.
 */
function blurDeviation(
  sums: Float64Array,
  count: number,
  dark: number,
  light: number,
  reach: number,
): number {
  let area = 0;
  for (const sum of sums) {
    area += 1 - Math.min(1, Math.abs((2 * (sum / count - dark)) / (light - dark) - 1));
  }
  return (area * 2 * reach) / sums.length / (2 * Math.sqrt(2 / Math.PI));
}

/** Fills the profile from −reach to reach and returns its mean; NaN where it leaves the frame. */
function readProfile(
  frame: Frame,
  x: number,
  y: number,
  n: Point,
  reach: number,
  profile: Float64Array,
): number {
  const samples = profile.length;
  let sum = 0;
  for (let k = 0; k < samples; k++) {
    const s = reach * ((2 * k + 1) / samples - 1);
    const value = sampleLinearGreen(frame, x + s * n.x, y + s * n.y);
    profile[k] = value;
    sum += value;
  }
  return sum / samples;
}

function readLevel(frame: Frame, x: number, y: number, n: Point, pixelsPerUnit: number): number {
  const readings = 3;
  let sum = 0;
  for (let k = 0; k < readings; k++) {
    const s = (levelsFrom + ((levelsTo - levelsFrom) * (k + 0.5)) / readings) * pixelsPerUnit;
    sum += sampleLinearGreen(frame, x + s * n.x, y + s * n.y);
  }
  return sum / readings;
}

/** The image's unit normal to a line whose normal in the plane is given: normals map by the inverse transpose. */
export function imageNormal(
  map: LensMap,
  at: Point,
  normal: Point,
): Point & { unitsPerPixel: number } {
  const [a, b, c, d] = lensMapJacobian(map, at.x, at.y);
  const determinant = a * d - b * c;
  const x = (d * normal.x - c * normal.y) / determinant;
  const y = (-b * normal.x + a * normal.y) / determinant;
  const length = Math.sqrt(x * x + y * y);
  return { x: x / length, y: y / length, unitsPerPixel: length };
}

/** Straight line through (t, d), once more without the points farther than 3 σ from it. */
function fitLine(t: readonly number[], d: readonly number[]): SideShift {
  const first = leastSquaresLine(t, d, () => true);
  const errors = d.map((value, i) => value - first.offset - first.slope * t[i]!);
  const deviation = Math.sqrt(errors.reduce((sum, e) => sum + e * e, 0) / errors.length);
  return leastSquaresLine(t, d, (i) => Math.abs(errors[i]!) <= 3 * deviation);
}

function leastSquaresLine(
  t: readonly number[],
  d: readonly number[],
  keep: (i: number) => boolean,
): SideShift {
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
