import type { Frame } from '../image.ts';
import type { Registration } from '../target/registration.ts';

/** Mean of a station's pad or square, away from its edges. */
export interface Plateau {
  readonly reflectance: number;
  /** Centre of the station, image pixels. */
  readonly x: number;
  readonly y: number;
  /** Mean of each channel in the file's linear light, and its standard uncertainty from noise. */
  readonly linear: readonly [number, number, number];
  readonly uncertainty: readonly [number, number, number];
}

/** Target units that the pixels stay clear of an edge. */
const clear = 10;
const fewestPixels = 40;
/** Neighbouring pixels share noise after demosaicing and compression; this many count as one. Common practice, no source. */
const pixelsPerIndependent = 4;

/** Pads and squares, unclipped, of all stations whose square lies where it should (nothing glares or lies on it): greys as light and as dark as the edges' own two sides. */
export function samplePlateaus(frame: Frame, registration: Registration): Plateau[] {
  const { station, stations } = registration.target;
  const square = createSums();
  const pad = createSums();
  return stations.flatMap((at) => {
    const place = registration.corners.has(at.id) ? placeStation(frame, registration, at) : null;
    if (!place) return [];
    square.fill(0);
    pad.fill(0);
    addPixels(frame, place, station, square, pad);
    const plateaus = [
      toPlateau(square, place, station.square.reflectance),
      toPlateau(pad, place, station.pad.reflectance),
    ];
    return plateaus.filter((plateau) => plateau !== null);
  });
}

/** Count of pixels, of clipped codes, then the sums of red, green and blue light and of their squares. */
function createSums(): Float64Array {
  return new Float64Array(8);
}

interface Place {
  /** Centre of the station, image pixels. */
  readonly x: number;
  readonly y: number;
  /** Image offset → offset along the square's own sides in target units, row-major 2 × 2. */
  readonly inverse: readonly [number, number, number, number];
  /** Half of the box about the pad, px. */
  readonly reachX: number;
  readonly reachY: number;
}

/** @returns null where the pad isn't wholly in the frame */
function placeStation(
  { width, height }: Frame,
  registration: Registration,
  at: { readonly x: number; readonly y: number },
): Place | null {
  const { padRadius, rotationDegrees } = registration.target.station;
  const { x, y } = registration.toImage(at.x, at.y);
  const [a, b, c, d] = registration.jacobian(at.x, at.y);
  const reachX = padRadius * Math.hypot(a, b);
  const reachY = padRadius * Math.hypot(c, d);
  if (x < reachX || y < reachY || x > width - reachX || y > height - reachY) return null;
  const turn = (rotationDegrees * Math.PI) / 180;
  const cos = Math.cos(turn) / (a * d - b * c);
  const sin = Math.sin(turn) / (a * d - b * c);
  const inverse = [
    cos * d - sin * c,
    sin * a - cos * b,
    -cos * c - sin * d,
    cos * a + sin * b,
  ] as const;
  return { x, y, inverse, reachX, reachY };
}

/** One look over the pad's box for both; nothing is made within the loop, which would cost more than the reading. */
function addPixels(
  frame: Frame,
  { x, y, inverse, reachX, reachY }: Place,
  station: Registration['target']['station'],
  square: Float64Array,
  pad: Float64Array,
): void {
  const { data, width, maxCode, toLinear } = frame;
  const [red, green, blue] = toLinear;
  const [ux, uy, vx, vy] = inverse;
  const half = station.squareSide / 2;
  const inner = half - clear;
  const outer = half + clear;
  const rim = (station.padRadius - clear) ** 2;
  const low = maxCode / 255;
  const high = maxCode - low;
  const step = strideOf(reachX, reachY);
  for (let row = Math.ceil(y - reachY); row < y + reachY - 1; row += step) {
    const dy = row + 0.5 - y;
    for (let col = Math.ceil(x - reachX); col < x + reachX - 1; col += step) {
      const dx = col + 0.5 - x;
      const u = Math.abs(ux * dx + uy * dy);
      const v = Math.abs(vx * dx + vy * dy);
      const away = Math.max(u, v);
      if (away >= inner && (away <= outer || u * u + v * v >= rim)) continue;
      const sums = away < inner ? square : pad;
      const at = (row * width + col) * 3;
      const r = data[at]!;
      const g = data[at + 1]!;
      const b = data[at + 2]!;
      if (r <= low || r >= high) sums[1]! += 1;
      if (g <= low || g >= high) sums[1]! += 1;
      if (b <= low || b >= high) sums[1]! += 1;
      addLight(sums, red[r]!, green[g]!, blue[b]!);
    }
  }
}

function addLight(sums: Float64Array, red: number, green: number, blue: number): void {
  sums[0]! += 1;
  sums[2]! += red;
  sums[3]! += green;
  sums[4]! += blue;
  sums[5]! += red * red;
  sums[6]! += green * green;
  sums[7]! += blue * blue;
}

/** Ten thousand pixels a station are enough; odd steps don't fall on the same places of JPEG's blocks again and again. */
function strideOf(reachX: number, reachY: number): number {
  return Math.floor(Math.sqrt(reachX * reachY) / 64) | 1;
}

function toPlateau(sums: Float64Array, { x, y }: Place, reflectance: number): Plateau | null {
  const count = sums[0]!;
  if (count < fewestPixels || sums[1]! > count / 100) return null;
  const mean = (channel: number) => sums[2 + channel]! / count;
  const uncertainty = (channel: number) =>
    Math.sqrt(
      (Math.max(0, sums[5 + channel]! / count - mean(channel) ** 2) * pixelsPerIndependent) / count,
    );
  return {
    reflectance,
    x,
    y,
    linear: [mean(0), mean(1), mean(2)],
    uncertainty: [uncertainty(0), uncertainty(1), uncertainty(2)],
  };
}
