import type { Samples } from './collect-samples.ts';
import type { LineFit } from './fit-line.ts';
import type { Profile } from './trace-edges.ts';

export const binsPerPixel = 8;

/** Finer than a profile's bins, which don't begin at the same places for all channels. */
const finePerPixel = 4 * binsPerPixel;

/** Sums over the pixels in bins of 1/32 px along one line, for all channels at once. */
export interface Bins {
  readonly count: number;
  /** `width` numbers a bin: pixels, distance from the line, its square; then light and its square for each channel. Scratch space, overwritten by the next edge. */
  readonly sums: Float64Array;
  /** Distance of the first bin's start from the line, px, to the dark side. */
  readonly reach: number;
}

/** Places in a bin's sums. */
export const width = 11;
export const lightAt = (channel: 0 | 1 | 2 | 3) => 3 + 2 * channel;

let scratch = new Float64Array(0);

/** @param hasLuma  whether the samples' luma is filled */
export function binSamples(
  samples: Samples,
  { shift, tilt, bend }: LineFit,
  reach: number,
  hasLuma: boolean,
): Bins {
  const { distance, along, light, count: pixels } = samples;
  const [red, green, blue, luma] = light;
  const count = Math.ceil(2 * reach * finePerPixel);
  if (scratch.length < count * width) scratch = new Float64Array(count * width);
  const sums = scratch;
  sums.fill(0, 0, count * width);
  for (let i = 0; i < pixels; i++) {
    const t = along[i]!;
    const d = distance[i]! - shift - (tilt + bend * t) * t;
    const place = (d + reach) * finePerPixel;
    if (!(place >= 0 && place < count)) continue;
    const at = (place | 0) * width;
    const r = red[i]!;
    const g = green[i]!;
    const b = blue[i]!;
    sums[at]! += 1;
    sums[at + 1]! += d;
    sums[at + 2]! += d * d;
    sums[at + 3]! += r;
    sums[at + 4]! += r * r;
    sums[at + 5]! += g;
    sums[at + 6]! += g * g;
    sums[at + 7]! += b;
    sums[at + 8]! += b * b;
    if (!hasLuma) continue;
    const y = luma[i]!;
    sums[at + 9]! += y;
    sums[at + 10]! += y * y;
  }
  return { count, sums, reach };
}

/** A channel's profile: distances from its own edge, light over its own step. @param offset  of its edge from the bins' line, px */
export function profileOf(
  { count, sums, reach }: Bins,
  channel: 0 | 1 | 2 | 3,
  { low, step }: LineFit,
  offset: number,
): Profile {
  const gain = 1 / step;
  const bins = Math.ceil(2 * reach * binsPerPixel);
  const distance = new Float64Array(bins);
  const value = new Float64Array(bins);
  const pixels = new Float64Array(bins);
  const end = count * width;
  const light = lightAt(channel);
  for (let at = 0; at < end; at += width) {
    const n = sums[at]!;
    const place = (sums[at + 1]! / n - offset + reach) * binsPerPixel;
    // An empty bin has no place.
    if (!(place >= 0 && place < bins)) continue;
    const bin = place | 0;
    distance[bin]! += sums[at + 1]!;
    value[bin]! += sums[at + light]!;
    pixels[bin]! += n;
  }
  let filled = 0;
  for (let bin = 0; bin < bins; bin++) {
    const n = pixels[bin]!;
    if (n === 0) continue;
    distance[filled] = distance[bin]! / n - offset;
    value[filled] = (value[bin]! / n - low) * gain;
    pixels[filled] = n;
    filled++;
  }
  return {
    distance: distance.slice(0, filled),
    value: value.slice(0, filled),
    pixels: pixels.slice(0, filled),
    reach,
    floor: low * gain,
  };
}
