import { lightTables } from '../edge/collect-samples.ts';
import type { Frame } from '../image.ts';
import { luminanceWeights } from '../noise/measure-spot.ts';
import type { Registration } from '../target/registration.ts';
import type { Target } from '../target/target.ts';
import type { LightSpot } from './fit-shading.ts';

const inset = 0.8;
const fewestPixels = 9;
/** What a print's own unevenness and a tone response leave in a spot, EV. Our choice; a sheet of 1 % evenness. */
const unevenness = 0.006;
/** Square of pixels that JPEG makes alike, so that averaging over more pixels helps less. */
const clump = 4;

/** Light of every plain spot that is in the frame and unclipped, with the four corners of the field, which are plain as well. */
export function readBackground(
  frame: Frame,
  registration: Registration,
  lightOf?: (code0to1: number) => number,
): LightSpot[] {
  const tables = lightTables(frame, lightOf);
  const half = Math.hypot(frame.width, frame.height) / 2;
  const spots: LightSpot[] = [];
  for (const { x, y, radius } of [
    ...registration.target.plain,
    ...fieldCorners(registration.target),
  ]) {
    const at = registration.toImage(x, y);
    const rim = registration.toImage(x + radius * inset, y);
    const read = readSpot(frame, tables, at.x, at.y, Math.hypot(rim.x - at.x, rim.y - at.y));
    if (!read) continue;
    spots.push({
      x: (at.x - frame.width / 2) / half,
      y: (at.y - frame.height / 2) / half,
      ...read,
    });
  }
  return spots;
}

/** Between a corner station's pad and the field's edge there is room for a spot. */
function fieldCorners(target: Target): { x: number; y: number; radius: number }[] {
  const radius = 8;
  const x = target.width / 2 - 1.6 * radius;
  const y = target.height / 2 - 1.6 * radius;
  const clear = target.stations.every(
    (s) => Math.hypot(Math.abs(s.x) - x, Math.abs(s.y) - y) > target.station.padRadius + radius,
  );
  if (!clear) return [];
  return [-1, 1].flatMap((i) => [-1, 1].map((j) => ({ x: i * x, y: j * y, radius })));
}

function readSpot(
  frame: Frame,
  tables: readonly [Float32Array, Float32Array, Float32Array],
  x: number,
  y: number,
  radius: number,
): { ev: number; uncertainty: number } | null {
  const { width, height, data, maxCode, toSrgb } = frame;
  if (x < radius || y < radius || x > width - radius || y > height - radius) return null;
  const [wr, wg, wb] = luminanceWeights(toSrgb);
  const [red, green, blue] = tables;
  const low = maxCode / 255;
  const high = maxCode - low;
  // Every other pixel of a large spot is enough.
  const step = radius > 24 ? 2 : 1;
  let sum = 0;
  let squares = 0;
  let count = 0;
  for (let row = Math.ceil(y - radius - 0.5); row + 0.5 <= y + radius; row += step)
    for (let col = Math.ceil(x - radius - 0.5); col + 0.5 <= x + radius; col += step) {
      if ((col + 0.5 - x) ** 2 + (row + 0.5 - y) ** 2 > radius * radius) continue;
      const at = (row * width + col) * 3;
      const r = data[at]!;
      const g = data[at + 1]!;
      const b = data[at + 2]!;
      if (Math.min(r, g, b) <= low || Math.max(r, g, b) >= high) return null;
      const light = wr * red[r]! + wg * green[g]! + wb * blue[b]!;
      sum += light;
      squares += light * light;
      count++;
    }
  if (count < fewestPixels || !(sum > 0)) return null;
  const mean = sum / count;
  const variance = Math.max(0, squares / count - mean * mean);
  const noise = Math.sqrt((variance * clump) / count) / mean / Math.LN2;
  return { ev: Math.log2(mean), uncertainty: Math.hypot(noise, unevenness) };
}
