import type { Frame, Plane } from '../image.ts';

/** Bilinear reading of a plane at a point; the first pixel's centre is (0.5, 0.5). NaN outside the outermost pixel centres. */
export function samplePlane(plane: Plane, x: number, y: number): number {
  const left = Math.floor(x - 0.5);
  const top = Math.floor(y - 0.5);
  const { width, height, data } = plane;
  if (!(left >= 0 && top >= 0 && left + 1 < width && top + 1 < height)) return Number.NaN;
  const fx = x - 0.5 - left;
  const fy = y - 0.5 - top;
  const i = top * width + left;
  const upper = data[i]! + fx * (data[i + 1]! - data[i]!);
  const lower = data[i + width]! + fx * (data[i + width + 1]! - data[i + width]!);
  return upper + fy * (lower - upper);
}

/** The same for linear green light, 0…1, straight from the frame's codes. NaN outside the outermost pixel centres. */
export function sampleLinearGreen(frame: Frame, x: number, y: number): number {
  const left = Math.floor(x - 0.5);
  const top = Math.floor(y - 0.5);
  const { width, height, data } = frame;
  if (!(left >= 0 && top >= 0 && left + 1 < width && top + 1 < height)) return Number.NaN;
  const fx = x - 0.5 - left;
  const fy = y - 0.5 - top;
  const table = frame.toLinear[1];
  const i = (top * width + left) * 3 + 1;
  const below = i + width * 3;
  const upperLeft = table[data[i]!]!;
  const lowerLeft = table[data[below]!]!;
  const upper = upperLeft + fx * (table[data[i + 3]!]! - upperLeft);
  const lower = lowerLeft + fx * (table[data[below + 3]!]! - lowerLeft);
  return upper + fy * (lower - upper);
}
