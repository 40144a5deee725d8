import type { Frame } from '../image.ts';
import { lumaIndex } from './luma.ts';
import type { PlacedEdge } from './place-edges.ts';

/** Code → light for the three channels. */
export type LightTables = readonly [Float32Array, Float32Array, Float32Array];

/** The pixels about one edge. Arrays are scratch space, overwritten by the next edge; the first `count` entries are in use. */
export interface Samples {
  count: number;
  /** Distance from the placed edge along its normal toward growing b, px. */
  readonly distance: Float32Array;
  /** Position along the edge, −1 … 1 over `halfLength`. */
  readonly along: Float32Array;
  /** Light of each channel and of luma, times the edge's `outward`, so that every profile rises with distance. */
  readonly light: readonly [Float32Array, Float32Array, Float32Array, Float32Array];
  /** Half of the length of edge that is used, px. */
  halfLength: number;
  /** Share of pixels whose green is at either end of the scale. */
  clipped: number;
}

const capacity = 1 << 16;

export function createSamples(): Samples {
  const array = () => new Float32Array(capacity);
  return {
    count: 0,
    distance: array(),
    along: array(),
    light: [array(), array(), array(), array()],
    halfLength: 0,
    clipped: 0,
  };
}

/** Light table of each channel: the tone response where there is one, else the file's own. */
export function lightTables(frame: Frame, lightOf?: (code0to1: number) => number): LightTables {
  if (!lightOf) return frame.toLinear;
  const table = new Float32Array(frame.maxCode + 1);
  for (let code = 0; code < table.length; code++) table[code] = lightOf(code / frame.maxCode);
  return [table, table, table];
}

/** Radius of the pad over the square's half side, 62/34: pixels beyond it are background. */
const padOverHalfSide = 62 / 34;

/**
 * Fills `samples` with the pixels within `reach` of an edge that the pad's rim, the square's far half and its corners leave alone.
 * @param blur       deviation of the edge's blur as known so far, px
 * @param lumaTable  see luma.ts; null leaves the samples' luma unfilled
 */
export function collectSamples(
  frame: Frame,
  tables: LightTables,
  placed: PlacedEdge,
  blur: number,
  reach: number,
  samples: Samples,
  lumaTable: Float32Array | null,
): void {
  const { data, maxCode } = frame;
  const [redTable, greenTable, blueTable] = tables;
  const { length, slope, sagitta, outward } = placed;
  const { middleA, middleB, strideA, strideB, endA, endB } = axesOf(frame, placed);
  const cosine = 1 / Math.hypot(1, slope);
  const halfChord = (length / 2) * cosine;
  const halfLength = usableHalfLength(length, blur);
  const halfSide = length / 2;
  const rim = Math.max(0, padOverHalfSide * halfSide - 2.5 * blur - 1.5) ** 2;
  const inside = Math.max(halfSide * 0.9, length - 4 * blur - 4) * 0.75;
  const low = maxCode / 255;
  const high = maxCode - low;
  const { distance, along, light } = samples;
  const [red, green, blue, luma] = light;
  const spanA = halfLength * cosine + reach * Math.abs(slope) * cosine + 1;
  const firstA = Math.max(0, Math.ceil(middleA - spanA - 0.5));
  const lastA = Math.min(endA - 1, Math.floor(middleA + spanA - 0.5));
  let count = 0;
  let clipped = 0;
  for (let ia = firstA; ia <= lastA; ia++) {
    const a = ia + 0.5 - middleA;
    const q = a / halfChord;
    const line = slope * a + sagitta * (1 - q * q);
    const localSlope = slope - (2 * sagitta * q) / halfChord;
    const localCosine = 1 / Math.sqrt(1 + localSlope * localSlope);
    const spanB = reach / localCosine;
    const firstB = Math.max(0, Math.ceil(middleB + line - spanB - 0.5));
    const lastB = Math.min(endB - 1, Math.floor(middleB + line + spanB - 0.5));
    for (let ib = firstB; ib <= lastB; ib++) {
      const b = ib + 0.5 - middleB;
      const d = (b - line) * localCosine;
      const u = (a + slope * b) * cosine;
      if (u > halfLength || u < -halfLength) continue;
      const out = d * outward;
      if (-out > inside || (out > 0 && (out + halfSide) ** 2 + u * u > rim)) continue;
      if (count === capacity) break;
      const index = ia * strideA + ib * strideB;
      const code = data[index + 1]!;
      if (code <= low || code >= high) clipped++;
      distance[count] = d;
      along[count] = u / halfLength;
      red[count] = redTable[data[index]!]! * outward;
      green[count] = greenTable[code]! * outward;
      blue[count] = blueTable[data[index + 2]!]! * outward;
      if (lumaTable)
        luma[count] = lumaTable[lumaIndex(data[index]!, code, data[index + 2]!)]! * outward;
      count++;
    }
  }
  samples.count = count;
  samples.halfLength = halfLength;
  samples.clipped = count > 0 ? clipped / count : 0;
}

/** Where and how far apart pixels lie along the edge (a) and across it (b). */
function axesOf({ width, height }: Frame, { edge, middle }: PlacedEdge) {
  const down = { stride: width * 3, end: height, middle: middle.y };
  const right = { stride: 3, end: width, middle: middle.x };
  const [a, b] = edge === 'vertical' ? [down, right] : [right, down];
  return {
    middleA: a.middle,
    middleB: b.middle,
    strideA: a.stride,
    strideB: b.stride,
    endA: a.end,
    endB: b.end,
  };
}

/** The corners' own blur reaches along the edge; a small square gives up part of that distance to keep pixels. */
function usableHalfLength(length: number, blur: number): number {
  return length / 2 - Math.min(4 * blur + 5, 0.22 * length);
}
