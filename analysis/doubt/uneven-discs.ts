import type { DiscSample } from '../colour/disc-sample.ts';
import { luminanceWeights } from '../colour/frame-colour.ts';
import type { Frame } from '../image.ts';
import type { Warning } from '../result.ts';

/** Cells across the read part of a disc. */
const cells = 3;
/** Part of the radius that is read, as in exposure/sample-discs.ts. */
const innerShare = 0.6;
/** Largest departure of a cell's light from the disc's, and how far it must stand out of the cell's own noise. Our choices. */
const mostUneven = 0.03;
const standsOut = 5;
/** Below this many pixels a cell says nothing. */
const fewestPixels = 9;
/** Pixels that count as one after demosaicing and compression. Common practice, no source. */
const pixelsPerIndependent = 4;

/**
 * Tells the discs that aren't of one colour: a reflection or dirt lies on part of them. Slow shading, known by `lightAt`, is allowed.
 */
export function leaveOutUneven(
  frame: Frame,
  samples: readonly DiscSample[],
  lightAt: (x: number, y: number) => number,
): { even: DiscSample[]; warnings: Warning[] } {
  const uneven = samples.filter((s) => !s.clipped && isUneven(frame, s, lightAt));
  if (uneven.length === 0) return { even: [...samples], warnings: [] };
  const names = uneven.map(({ disc }) => disc.id).join(', ');
  return {
    even: samples.filter((s) => !uneven.includes(s)),
    warnings: [
      {
        code: 'discs-uneven',
        message: `Left out because light lies unevenly on them: ${names}. Move the lamps to the sides so that nothing is mirrored in the print, wipe it, and photograph again.`,
      },
    ],
  };
}

function isUneven(
  frame: Frame,
  sample: DiscSample,
  lightAt: (x: number, y: number) => number,
): boolean {
  const read = readCells(frame, sample);
  if (!read) return false;
  const here = lightAt(sample.x, sample.y);
  return read.some(({ x, y, mean, uncertainty }) => {
    const away = Math.abs((mean * here) / lightAt(x, y) / sample.luminance - 1);
    return away > Math.max(mostUneven, standsOut * (uncertainty / sample.luminance));
  });
}

interface Cell {
  x: number;
  y: number;
  mean: number;
  uncertainty: number;
}

/** The square inscribed in the read part, in three by three cells; null when they are too small. */
function readCells(frame: Frame, { x, y, radius }: DiscSample): Cell[] | null {
  const half = (innerShare * radius) / Math.SQRT2;
  const side = Math.floor((2 * half) / cells);
  if (side * side < fewestPixels) return null;
  const left = Math.round(x - (cells * side) / 2);
  const top = Math.round(y - (cells * side) / 2);
  if (left < 0 || top < 0) return null;
  if (left + cells * side > frame.width || top + cells * side > frame.height) return null;
  return Array.from({ length: cells * cells }, (_, i) =>
    readCell(frame, left + (i % cells) * side, top + Math.floor(i / cells) * side, side),
  );
}

function readCell(frame: Frame, left: number, top: number, side: number): Cell {
  const { data, width, toLinear } = frame;
  const [wr, wg, wb] = luminanceWeights(frame);
  const [red, green, blue] = toLinear;
  let sum = 0;
  let squares = 0;
  for (let row = top; row < top + side; row++)
    for (let col = left; col < left + side; col++) {
      const at = (row * width + col) * 3;
      const light = wr * red[data[at]!]! + wg * green[data[at + 1]!]! + wb * blue[data[at + 2]!]!;
      sum += light;
      squares += light * light;
    }
  const count = side * side;
  const mean = sum / count;
  const variance = Math.max(0, squares / count - mean * mean);
  // Rounding to codes, which a flat cell shares, is worth half a code.
  const code = Math.round(frame.maxCode * 0.4);
  const step = (green[code + 1]! - green[code]!) / 2;
  const uncertainty = Math.hypot(Math.sqrt((variance * pixelsPerIndependent) / count), step / 4);
  return { x: left + side / 2, y: top + side / 2, mean, uncertainty };
}
