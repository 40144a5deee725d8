/** Deviation of the kernel of `doubleBoxBlur`. */
export function deviationOf(size: number): number {
  return Math.sqrt((size * size - 1) / 6);
}

/**
 * Two box filters of odd width `size` after one another, each way: a triangle, close to a Gaussian. The border repeats the outermost
 * pixels. Row-major.
 * @param buffer of the image's size, overwritten
 * @returns a new array of the same size
 */
export function doubleBoxBlur(
  data: Float32Array,
  width: number,
  height: number,
  size: number,
  buffer: Float32Array,
): Float32Array {
  const out = new Float32Array(width * height);
  blurRows(data, buffer, width, height, size);
  blurRows(buffer, out, width, height, size);
  blurColumns(out, buffer, width, height, size);
  blurColumns(buffer, out, width, height, size);
  return out;
}

function blurRows(
  from: Float32Array,
  to: Float32Array,
  width: number,
  height: number,
  size: number,
) {
  const reach = size >> 1;
  const share = 1 / size;
  for (let row = 0; row < height; row++) {
    const start = row * width;
    const end = start + width - 1;
    let sum = 0;
    for (let k = -reach; k <= reach; k++) sum += from[clamp(start + k, start, end)]!;
    for (let i = start; i <= end; i++) {
      to[i] = sum * share;
      const enter = i + reach + 1;
      const leave = i - reach;
      sum += from[Math.min(enter, end)]! - from[Math.max(leave, start)]!;
    }
  }
}

function blurColumns(
  from: Float32Array,
  to: Float32Array,
  width: number,
  height: number,
  size: number,
) {
  const reach = size >> 1;
  const share = 1 / size;
  const sums = new Float64Array(width);
  for (let k = -reach; k <= reach; k++) {
    const start = clamp(k, 0, height - 1) * width;
    for (let col = 0; col < width; col++) sums[col]! += from[start + col]!;
  }
  for (let row = 0; row < height; row++) {
    const enter = clamp(row + reach + 1, 0, height - 1) * width;
    const leave = clamp(row - reach, 0, height - 1) * width;
    const start = row * width;
    for (let col = 0; col < width; col++) {
      to[start + col] = sums[col]! * share;
      sums[col]! += from[enter + col]! - from[leave + col]!;
    }
  }
}

function clamp(value: number, low: number, high: number): number {
  return value < low ? low : Math.min(value, high);
}
