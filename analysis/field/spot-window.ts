import type { Frame } from '../image.ts';
import { solveSpd } from '../numeric/spd.ts';
import type { Ring } from './shadow-profile.ts';

/** Image pixels; sigma is about the shadow's standard deviation. */
export interface SpotPlace {
  readonly x: number;
  readonly y: number;
  readonly sigma: number;
}

/** Pixels about a place with the slope of the light round them taken out, in codes of R + 2 G + B. */
interface Window {
  readonly dx: Float64Array;
  readonly dy: Float64Array;
  readonly code: Float64Array;
  readonly count: number;
  /** Code of the surroundings at the place. */
  readonly background: number;
}

/** From this share of the window's radius on, pixels count as surroundings. */
const rim = 0.8;
/** Pixels along a radius; more of a large spot tell nothing new. */
const samples = 30;

/** The same place at the middle of what is missing about it, since layers of large pixels place it roughly. */
export function centreOf<Place extends SpotPlace>(frame: Frame, place: Place): Place {
  let { x, y } = place;
  const reach = 3 * place.sigma + 2;
  for (let round = 0; round < 4; round++) {
    const { dx, dy } = pull(readWindow(frame, x, y, reach), reach);
    x = Math.min(frame.width, Math.max(0, x + dx));
    y = Math.min(frame.height, Math.max(0, y + dy));
    if (Math.hypot(x - place.x, y - place.y) > 1.5 * place.sigma + 2) return place;
  }
  return { ...place, x, y };
}

/** Mean light in rings about a place, out to 4.5 standard deviations. */
export function ringsAbout(
  frame: Frame,
  { x, y, sigma }: SpotPlace,
  codeToLight: (code: number) => number,
): Ring[] {
  const reach = Math.max(6, 4.5 * sigma);
  const rings = Math.min(24, Math.max(8, Math.round(reach / 1.2)));
  const { dx, dy, code, count } = readWindow(frame, x, y, reach);
  const sum = new Float64Array(rings);
  const pixels = new Float64Array(rings);
  const radii = new Float64Array(rings);
  for (let i = 0; i < count; i++) {
    const radius = Math.hypot(dx[i]!, dy[i]!);
    const ring = Math.min(rings - 1, Math.floor((radius / reach) * rings));
    sum[ring]! += code[i]!;
    radii[ring]! += radius;
    pixels[ring]!++;
  }
  const profile: Ring[] = [];
  for (let ring = 0; ring < rings; ring++) {
    const n = pixels[ring]!;
    if (n === 0) continue;
    const light = codeToLight(sum[ring]! / n / 4 / frame.maxCode);
    profile.push({ radius: radii[ring]! / n, light, weight: n });
  }
  return profile;
}

function readWindow(frame: Frame, x: number, y: number, reach: number): Window {
  const { data, width, height } = frame;
  const step = Math.max(1, Math.floor(reach / samples));
  const size = (Math.ceil((2 * reach) / step) + 1) ** 2;
  const [dx, dy, code] = [new Float64Array(size), new Float64Array(size), new Float64Array(size)];
  let count = 0;
  const bottom = Math.min(height, y + reach);
  const right = Math.min(width, x + reach);
  for (let row = Math.max(0, Math.ceil(y - reach)); row < bottom; row += step)
    for (let col = Math.max(0, Math.ceil(x - reach)); col < right; col += step) {
      const [across, down] = [col + 0.5 - x, row + 0.5 - y];
      if (across * across + down * down > reach * reach) continue;
      const at = (row * width + col) * 3;
      dx[count] = across;
      dy[count] = down;
      code[count] = data[at]! + 2 * data[at + 1]! + data[at + 2]!;
      count++;
    }
  const [level, slopeX, slopeY] = planeOf(dx, dy, code, count, rim * reach);
  for (let i = 0; i < count; i++) code[i]! -= slopeX * dx[i]! + slopeY * dy[i]!;
  return { dx, dy, code, count, background: level };
}

/** Level and slopes of the pixels beyond `inner`. */
function planeOf(
  dx: Float64Array,
  dy: Float64Array,
  code: Float64Array,
  count: number,
  inner: number,
): [number, number, number] {
  const normal = new Float64Array(9);
  const right = new Float64Array(3);
  for (let i = 0; i < count; i++) {
    const [x, y, value] = [dx[i]!, dy[i]!, code[i]!];
    if (x * x + y * y < inner * inner) continue;
    normal[0]!++;
    normal[3]! += x;
    normal[4]! += x * x;
    normal[6]! += y;
    normal[7]! += x * y;
    normal[8]! += y * y;
    right[0]! += value;
    right[1]! += x * value;
    right[2]! += y * value;
  }
  return solveSpd(normal, right) ? [right[0]!, right[1]!, right[2]!] : [0, 0, 0];
}

/** Mean offset of what is missing, under a window as wide as the shadow, which keeps about half of it: hence the 2. */
function pull(window: Window, reach: number): { dx: number; dy: number } {
  const { dx, dy, code, count, background } = window;
  let [sum, sumX, sumY, plainX, plainY, plain] = [0, 0, 0, 0, 0, 0];
  for (let i = 0; i < count; i++) {
    const [x, y] = [dx[i]!, dy[i]!];
    const weight = Math.exp((-4.5 * (x * x + y * y)) / (reach * reach));
    const missing = weight * (background - code[i]!);
    sum += missing;
    sumX += missing * x;
    sumY += missing * y;
    plain += weight;
    plainX += weight * x;
    plainY += weight * y;
  }
  if (!(sum > 0)) return { dx: 0, dy: 0 };
  // At the frame's edge the window itself is lopsided.
  return { dx: 2 * (sumX / sum - plainX / plain), dy: 2 * (sumY / sum - plainY / plain) };
}
