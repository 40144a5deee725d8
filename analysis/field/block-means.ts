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
  const { data, width, height, maxCode } = frame;
  const [wr, wg, wb] = luminanceWeights(frame);
  const [redLight, greenLight, blueLight] = frame.toLinear;
  const across = Math.floor(width / columns);
  const down = Math.floor(height / rows);
  // Odd steps, so that a sample doesn't fall on the same places of JPEG's blocks again and again.
  const step = Math.max(1, Math.floor(Math.sqrt((across * down) / enough)) | 1);
  const empty = () => new Float64Array(columns * rows);
  const [red, green, blue, luminance, spread] = [empty(), empty(), empty(), empty(), empty()];
  const count = Math.ceil(across / step) * Math.ceil(down / step);
  for (let block = 0; block < columns * rows; block++) {
    const left = (block % columns) * across;
    const top = Math.floor(block / columns) * down;
    // Taken out of one array, these would live on the heap and the loop be several times as slow.
    let r = 0;
    let g = 0;
    let b = 0;
    let sum = 0;
    let squares = 0;
    for (let y = top; y < top + down; y += step)
      for (let x = left; x < left + across; x += step) {
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
    red[block] = r / count / maxCode;
    green[block] = g / count / maxCode;
    blue[block] = b / count / maxCode;
    luminance[block] = sum / count;
    spread[block] = Math.sqrt(Math.max(0, squares / count - (sum / count) ** 2));
  }
  return { columns, rows, red, green, blue, luminance, spread, count };
}
