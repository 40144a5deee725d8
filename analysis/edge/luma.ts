import type { Frame } from '../image.ts';
import type { LightTables } from './collect-samples.ts';

/** JFIF's weights of red, green and blue codes in luma (ITU-T T.871), over 1024. */
const weights = [306, 601, 117] as const;
/** Steps of luma to a code: three rounded channels tell more than one. */
const finer = 4;

/** Luma keeps its full resolution where a file halves that of its colour. */
export interface Luma {
  /** Light by `lumaIndex`, for greys. */
  readonly table: Float32Array;
  /** Light that luma tells of three channels that got different light. */
  mix(red: number, green: number, blue: number): number;
}

/** Quarter codes of luma. */
export function lumaIndex(red: number, green: number, blue: number): number {
  return (weights[0] * red + weights[1] * green + weights[2] * blue + 128) >> 8;
}

/** Luma's response follows from the channels': a grey gives each channel its own code, and luma is their weighted sum. */
export function createLuma(frame: Frame, tables: LightTables): Luma {
  const greys = Array.from(tables[1]);
  const lumas = greys.map((light) => finer * lumaOf(tables, light, light, light));
  const table = new Float32Array(finer * frame.maxCode + 1);
  let k = 0;
  for (let i = 0; i < table.length; i++) {
    while (k < lumas.length - 2 && lumas[k + 1]! < i) k++;
    const span = lumas[k + 1]! - lumas[k]!;
    const part = span > 0 ? (i - lumas[k]!) / span : 0;
    table[i] = greys[k]! + (greys[k + 1]! - greys[k]!) * Math.max(0, part);
  }
  const mix = (red: number, green: number, blue: number) => {
    const at = finer * lumaOf(tables, red, green, blue);
    const low = Math.min(table.length - 2, Math.floor(at));
    return table[low]! + (table[low + 1]! - table[low]!) * (at - low);
  };
  return { table, mix };
}

function lumaOf(tables: LightTables, red: number, green: number, blue: number): number {
  const sum =
    weights[0] * codeOf(tables[0], red) +
    weights[1] * codeOf(tables[1], green) +
    weights[2] * codeOf(tables[2], blue);
  return sum / 1024;
}

/** The code, with its fraction, that a light comes out at. */
function codeOf(table: Float32Array, light: number): number {
  let low = 0;
  let high = table.length - 1;
  if (light <= table[low]!) return low;
  if (light >= table[high]!) return high;
  while (high - low > 1) {
    const middle = (low + high) >> 1;
    if (table[middle]! <= light) low = middle;
    else high = middle;
  }
  return low + (light - table[low]!) / (table[high]! - table[low]!);
}
