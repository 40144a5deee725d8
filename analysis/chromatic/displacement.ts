import { binsPerPixel } from '../edge/bin-samples.ts';
import type { ChannelTrace, EdgeTrace } from '../edge/trace-edges.ts';
import { fastNormalCdf } from '../numeric/normal.ts';
import { quadraticForm, solveSpd } from '../numeric/spd.ts';

/** Along the edge's normal toward growing x (or y), px. */
export interface EdgeDisplacement {
  readonly value: number;
  readonly uncertainty: number;
}

/**
 * How far one channel's edge lies from green's.
 * @param chromaHalved  the file keeps colour at half the resolution (4:2:0, 4:2:2)
 * @returns null when the profiles overlap too little
 */
export function displacementBetween(
  edge: EdgeTrace,
  colour: 'red' | 'blue',
  chromaHalved: boolean,
): EdgeDisplacement | null {
  const other = edge[colour];
  if (!other) return null;
  if (chromaHalved) return fromBlurredChroma(edge.green, other);
  const { green } = edge;
  return {
    value: other.shift - green.shift,
    uncertainty: Math.hypot(green.shiftUncertainty, other.shiftUncertainty),
  };
}

/**
 * Deviations, px, that the displaced part is looked for in, over the edge's own: chroma averaged over two pixels and interpolated
 * back spreads by about 1; rounding to a JPEG's coarse steps drops its high frequencies and spreads it over the block. Found on
 * rendered scenes at qualities 85 to 95; two of them leave 15 % of the displacement out of account.
 */
const spreads = [1, 2, 4];
/** Unknowns: level, step, blur, slope of the light, and a shift in each of the spreads. */
const unknowns = 4 + spreads.length;
/** Pixels farther from the edge than this say nothing of its displacement. */
const near = 20;
/** Codes are about this power of light (the inverse of display gamma, IEC 61966-2-1); halving acts on codes. */
const encoding = 0.45;

/**
 * With halved chroma a channel is luma plus blurred chroma, so its difference from green is the true difference, blurred: a step that
 * has moved leaves Φ((d − shift)/w) − Φ(d/w) there. An edge found in the channel itself would come out too near to green's.
 */
function fromBlurredChroma(green: ChannelTrace, other: ChannelTrace): EdgeDisplacement | null {
  const pairs = pairBins(green, other);
  if (pairs.distance.length < unknowns + 12) return null;
  let found: EdgeDisplacement | null = null;
  let shift = 0.05;
  for (let pass = 0; pass < 4; pass++) {
    found = solveShift(pairs, green, shift);
    if (!found) return null;
    const next = Math.abs(found.value) < 0.05 ? 0.05 : Math.max(-6, Math.min(6, found.value));
    if (Math.abs(next - shift) < 0.02) break;
    shift = next;
  }
  return found;
}

interface Pairs {
  /** From green's edge, px. */
  readonly distance: number[];
  readonly difference: number[];
  readonly weight: number[];
}

/** Linear in all but the shift, whose secant about `shift` is used. */
function solveShift(pairs: Pairs, green: ChannelTrace, shift: number): EdgeDisplacement | null {
  const normal = new Float64Array(unknowns * unknowns);
  const right = new Float64Array(unknowns);
  const row = new Float64Array(unknowns);
  let total = 0;
  let rows = 0;
  for (let i = 0; i < pairs.distance.length; i++) {
    const d = pairs.distance[i]!;
    if (Math.abs(d) > near) continue;
    fillRow(row, d, shift, green);
    const weight = pairs.weight[i]!;
    const difference = pairs.difference[i]!;
    total += weight * difference * difference;
    rows++;
    for (let j = 0; j < unknowns; j++) {
      right[j]! += weight * row[j]! * difference;
      for (let k = 0; k <= j; k++) normal[j * unknowns + k]! += weight * row[j]! * row[k]!;
    }
  }
  // A pull far weaker than the data, for the case that two spreads look alike.
  const weak = (1e-6 * total) / Math.max(1, rows) + 1e-9;
  for (let j = 0; j < unknowns; j++) normal[j * unknowns + j]! += weak;
  const c = right.slice();
  if (!solveSpd(normal, c)) return null;
  let squares = total;
  for (let j = 0; j < unknowns; j++) squares -= c[j]! * right[j]!;
  const variance = Math.max(4e-8, squares / Math.max(1, rows - unknowns));
  const sum = Float64Array.from({ length: unknowns }, (_, j) => (j < 4 ? 0 : 1));
  const value = c.reduce((s, v, j) => s + v * sum[j]!, 0);
  return { value, uncertainty: Math.sqrt(variance * quadraticForm(normal, sum)) };
}

/** Math.hypot is many times slower. */
function widened(a: number, b: number): number {
  return Math.sqrt(a * a + b * b);
}

function fillRow(row: Float64Array, d: number, shift: number, green: ChannelTrace): void {
  const { sigma, profile } = green;
  const rise = fastNormalCdf(d / sigma);
  row[0] = 1;
  row[1] = rise;
  row[2] = fastNormalCdf(d / widened(sigma, spreads[0]!)) - rise;
  row[3] = (d / 10) * (profile.floor + rise);
  for (let k = 0; k < spreads.length; k++) {
    const wide = widened(sigma, spreads[k]!);
    row[4 + k] = (fastNormalCdf((d - shift) / wide) - fastNormalCdf(d / wide)) / shift;
  }
}

/** Bins of both profiles at the same distance from green's edge, and their difference. */
function pairBins(green: ChannelTrace, other: ChannelTrace): Pairs {
  const pairs: Pairs = { distance: [], difference: [], weight: [] };
  const { profile } = green;
  const from = other.profile;
  const apart = other.shift - green.shift;
  const encodeOther = encoder(from.floor);
  const encodeGreen = encoder(profile.floor);
  for (let i = 0, j = 0; i < profile.distance.length; i++) {
    const d = profile.distance[i]!;
    const wanted = d - apart;
    while (j < from.distance.length - 1 && from.distance[j + 1]! <= wanted) j++;
    const left = from.distance[j]!;
    const right = from.distance[j + 1];
    if (right === undefined || left > wanted || right - left > 4 / binsPerPixel) continue;
    const part = (wanted - left) / (right - left);
    const value = from.value[j]! * (1 - part) + from.value[j + 1]! * part;
    const m = from.pixels[j]! * (1 - part) + from.pixels[j + 1]! * part;
    const n = profile.pixels[i]!;
    pairs.distance.push(d);
    pairs.difference.push(encodeOther(value) - encodeGreen(profile.value[i]!));
    pairs.weight.push((n * m) / (n + m));
  }
  return pairs;
}

/** From a normalised light value to a normalised code. */
function encoder(floor: number): (value: number) => number {
  const dark = power(floor);
  const span = power(1 + floor) - dark;
  return (value) => (power(value + floor) - dark) / span;
}

/** Profiles of falling edges are negative, see edge/. */
function power(light: number): number {
  return Math.sign(light) * Math.abs(light) ** encoding;
}
