import { solveSpd } from '../numeric/spd.ts';
import type { BlockMeans } from './block-means.ts';

export interface Evenness {
  /** Root mean square of the blocks' luminance about a smooth surface, as a share of its mean. */
  readonly roughness: number;
  /** Brightest over darkest of the smooth surface's blocks, EV. */
  readonly range: number;
  /** Mean luminance, file's linear light. */
  readonly mean: number;
  /** The smooth surface at the frame's centre and at a block of the grid. */
  readonly atCentre: number;
  surfaceAt(block: number): number;
}

/** Of a surface of fourth degree: a lens's fall of 2 EV to the corners, seen through a steep curve, bends more than a cubic can. */
const terms = 15;

/** How nearly a set of blocks lies on a surface of fourth degree of luminance. @param among indices of the blocks that count, 30 and more */
export function evennessOf(blocks: BlockMeans, among: readonly number[]): Evenness | null {
  const normal = new Float64Array(terms * terms);
  const right = new Float64Array(terms);
  const rows = among.map((block) => basisAt(blocks, block));
  among.forEach((block, i) => {
    const row = rows[i]!;
    for (let j = 0; j < terms; j++) {
      right[j]! += row[j]! * blocks.luminance[block]!;
      for (let k = 0; k <= j; k++) normal[j * terms + k]! += row[j]! * row[k]!;
    }
  });
  if (among.length < 2 * terms || !solveSpd(normal, right)) return null;
  let squares = 0;
  let sum = 0;
  let low = Number.POSITIVE_INFINITY;
  let high = 0;
  among.forEach((block, i) => {
    const surface = rows[i]!.reduce((s, r, j) => s + r * right[j]!, 0);
    squares += (blocks.luminance[block]! - surface) ** 2;
    sum += blocks.luminance[block]!;
    low = Math.min(low, surface);
    high = Math.max(high, surface);
  });
  const mean = sum / among.length;
  if (!(mean > 0 && low > 0)) return null;
  return {
    roughness: Math.sqrt(squares / among.length) / mean,
    range: Math.log2(high / low),
    mean,
    atCentre: right[0]!,
    surfaceAt: (block) => basisAt(blocks, block).reduce((s, r, j) => s + r * right[j]!, 0),
  };
}

function basisAt({ columns, rows }: BlockMeans, block: number): number[] {
  const x = ((block % columns) + 0.5) / columns - 0.5;
  const y = (Math.floor(block / columns) + 0.5) / rows - 0.5;
  const cubic = [1, x, y, x * x, x * y, y * y, x ** 3, x * x * y, x * y * y, y ** 3];
  return [...cubic, x ** 4, x ** 3 * y, x * x * y * y, x * y ** 3, y ** 4];
}

/** All blocks of a grid. */
export function everyBlock({ columns, rows }: BlockMeans): number[] {
  return Array.from({ length: columns * rows }, (_, i) => i);
}

/**
 * The even surface about the frame's middle: blocks joined to the middle one whose luminance differs little from the neighbour they are
 * joined through, without the outermost, which may hold the surface's rim.
 * @param most largest step from block to block, as a share
 */
export function growFromMiddle(blocks: BlockMeans, most: number): number[] {
  const { columns, rows, luminance, spread } = blocks;
  const start = Math.floor(rows / 2) * columns + Math.floor(columns / 2);
  const inside = new Uint8Array(columns * rows);
  const waiting = [start];
  inside[start] = 1;
  // Noise within a block of a card is alike from block to block; a rim or a thing within one stands out.
  const rough = 2.5 * spread[start]! + 0.05 * luminance[start]!;
  for (let at = waiting.pop(); at !== undefined; at = waiting.pop())
    for (const next of neighboursOf(at, columns, rows)) {
      const step = Math.abs(luminance[next]! / Math.max(luminance[at]!, 1e-6) - 1);
      const far = Math.abs(Math.log2(luminance[next]! / Math.max(luminance[start]!, 1e-6))) > 1.5;
      if (inside[next] || step > most || far || spread[next]! > rough) continue;
      inside[next] = 1;
      waiting.push(next);
    }
  return everyBlock(blocks).filter(
    (block) =>
      inside[block] === 1 && neighboursOf(block, columns, rows).every((next) => inside[next] === 1),
  );
}

function neighboursOf(block: number, columns: number, rows: number): number[] {
  const col = block % columns;
  const row = Math.floor(block / columns);
  const out: number[] = [];
  if (col > 0) out.push(block - 1);
  if (col < columns - 1) out.push(block + 1);
  if (row > 0) out.push(block - columns);
  if (row < rows - 1) out.push(block + columns);
  return out;
}
