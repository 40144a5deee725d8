import { luminanceWeights } from '../colour/frame-colour.ts';
import type { Frame } from '../image.ts';

/** Means over a grid of blocks, row-major: the frame as it looks from afar. */
export interface BlockMeans {
  readonly columns: number;
  readonly rows: number;
  /** Mean code of red, green and blue, 0…1 of full scale. */
  readonly red: Float64Array;
  readonly green: Float64Array;
  readonly blue: Float64Array;
  /** Mean luminance in the file's linear light. */
  readonly luminance: Float64Array;
  /** Standard deviation of the luminance within the block. */
  readonly spread: Float64Array;
  /** Pixels read in each block. */
  readonly count: number;
}

/** More pixels of a block than this make its mean no surer. */
const enoughPixels = 1500;

/**
 * @param columns, rows of the grid; blocks are whole pixels, what is left over at the right and bottom joins no block
 * @param enough pixels of a block, so that fewer than four times as many are read
 */
export function readBlocks(
  frame: Frame,
  columns: number,
  rows: number,
  enough = enoughPixels,
): BlockMeans {
  const { width, height, maxCode } = frame;
  const across = Math.floor(width / columns);
  const down = Math.floor(height / rows);
  // Odd steps, so that a sample doesn't fall on the same places of JPEG's blocks again and again.
  const step = Math.max(1, Math.floor(Math.sqrt((across * down) / enough)) | 1);
  const weights = luminanceWeights(frame);
  const empty = () => new Float64Array(columns * rows);
  const [red, green, blue, luminance, spread] = [empty(), empty(), empty(), empty(), empty()];
  const count = Math.ceil(across / step) * Math.ceil(down / step);
  const sums = new Float64Array(5);
  for (let block = 0; block < columns * rows; block++) {
    const left = (block % columns) * across;
    const top = Math.floor(block / columns) * down;
    sumBlock(frame, weights, { left, top, right: left + across, bottom: top + down, step }, sums);
    red[block] = sums[0]! / count / maxCode;
    green[block] = sums[1]! / count / maxCode;
    blue[block] = sums[2]! / count / maxCode;
    luminance[block] = sums[3]! / count;
    spread[block] = Math.sqrt(Math.max(0, sums[4]! / count - (sums[3]! / count) ** 2));
  }
  return { columns, rows, red, green, blue, luminance, spread, count };
}

interface Area {
  readonly left: number;
  readonly top: number;
  readonly right: number;
  readonly bottom: number;
  readonly step: number;
}

/** Red, green and blue codes, luminance and its square. By itself, because a function that is called often is compiled as a whole. */
function sumBlock(
  { data, width, toLinear }: Frame,
  [wr, wg, wb]: ReturnType<typeof luminanceWeights>,
  { left, top, right, bottom, step }: Area,
  sums: Float64Array,
): void {
  const [redLight, greenLight, blueLight] = toLinear;
  // Taken out of one array, these would live on the heap and the loop be several times as slow.
  let r = 0;
  let g = 0;
  let b = 0;
  let sum = 0;
  let squares = 0;
  for (let y = top; y < bottom; y += step)
    for (let x = left; x < right; x += step) {
      const at = (y * width + x) * 3;
      const light =
        wr * redLight[data[at]!]! +
        wg * greenLight[data[at + 1]!]! +
        wb * blueLight[data[at + 2]!]!;
      r += data[at]!;
      g += data[at + 1]!;
      b += data[at + 2]!;
      sum += light;
      squares += light * light;
    }
  sums[0] = r;
  sums[1] = g;
  sums[2] = b;
  sums[3] = sum;
  sums[4] = squares;
}
