import type { Frame, Plane } from '../image.ts';

/** The frame made small: means of the green codes, 0…1 of full scale. */
export interface ReducedFrame extends Plane {
  /** Frame pixels a reduced pixel spans, each way: reduced (x, y) is frame (x · factor, y · factor). */
  readonly factor: number;
}

// More samples a row and column of a large cell cost time and gain nothing for finding marks.
const samplesAcross = 3;

/**
 * Box means of the green channel with the longest side at most `longest`. Of large cells only evenly spread rows and columns are read.
 * Codes rather than light: they are about evenly spaced for the eye, so that a mark keeps its contrast from −2 to +1 EV.
 */
export function reduceGreen(frame: Frame, longest: number): ReducedFrame {
  const factor = Math.max(1, Math.ceil(Math.max(frame.width, frame.height) / longest));
  const width = Math.floor(frame.width / factor);
  const height = Math.floor(frame.height / factor);
  const offsets = sampleOffsets(factor);
  const scale = 1 / (offsets.length * offsets.length * frame.maxCode);
  const data = new Float32Array(width * height);
  for (let row = 0; row < height; row++) {
    const line = data.subarray(row * width, (row + 1) * width);
    for (const offset of offsets)
      addLine(line, frame.data, (row * factor + offset) * frame.width * 3 + 1, factor * 3, offsets);
    for (let col = 0; col < width; col++) line[col]! *= scale;
  }
  return { width, height, data, factor };
}

/** By itself, because a function that is called often is compiled as a whole. */
function addLine(
  line: Float32Array,
  codes: Frame['data'],
  from: number,
  stride: number,
  offsets: Int32Array,
): void {
  const across = offsets.length;
  let start = from;
  for (let col = 0; col < line.length; col++) {
    let sum = 0;
    for (let k = 0; k < across; k++) sum += codes[start + offsets[k]! * 3]!;
    line[col]! += sum;
    start += stride;
  }
}

/** Evenly spread and symmetric about the cell's middle, so that the means don't shift the picture. */
function sampleOffsets(factor: number): Int32Array {
  const count = Math.min(factor, samplesAcross);
  return Int32Array.from({ length: count }, (_, i) =>
    i < count / 2
      ? Math.floor(((i + 0.5) * factor) / count)
      : factor - 1 - Math.floor(((count - 1 - i + 0.5) * factor) / count),
  );
}
