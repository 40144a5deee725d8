import type { Plane } from '../image.ts';

/** Pixels on one side of a threshold that touch along their sides. */
export interface Blob {
  readonly light: boolean;
  area: number;
  /** Centroid in plane pixels, the first pixel's centre at (0.5, 0.5). */
  x: number;
  y: number;
  left: number;
  right: number;
  top: number;
  bottom: number;
  /** The leftmost pixel of the topmost row: the one to its left belongs to what surrounds the blob. */
  readonly firstCol: number;
  readonly firstRow: number;
}

/** Divides a plane in light (at or over the threshold) and dark blobs; `labels` gives each pixel's place in `blobs`. */
export function labelBlobs(
  plane: Plane,
  threshold: number,
): { labels: Int32Array; blobs: readonly Blob[] } {
  const { width, height, data } = plane;
  const labels = new Int32Array(width * height).fill(-1);
  const stack = new Int32Array(width * height);
  const blobs: Blob[] = [];
  for (let seed = 0; seed < labels.length; seed++) {
    if (labels[seed] !== -1) continue;
    const light = data[seed]! >= threshold;
    const label = blobs.length;
    const firstRow = Math.floor(seed / width);
    const firstCol = seed - firstRow * width;
    const blob: Blob = {
      light,
      area: 0,
      x: 0,
      y: 0,
      left: firstCol,
      right: firstCol,
      top: firstRow,
      bottom: firstRow,
      firstCol,
      firstRow,
    };
    let waiting = 0;
    const visit = (at: number) => {
      if (labels[at] !== -1 || data[at]! >= threshold !== light) return;
      labels[at] = label;
      stack[waiting++] = at;
    };
    visit(seed);
    while (waiting > 0) {
      const at = stack[--waiting]!;
      const row = Math.floor(at / width);
      const col = at - row * width;
      addPixel(blob, col, row);
      if (col > 0) visit(at - 1);
      if (col + 1 < width) visit(at + 1);
      if (row > 0) visit(at - width);
      if (row + 1 < height) visit(at + width);
    }
    blob.x = blob.x / blob.area + 0.5;
    blob.y = blob.y / blob.area + 0.5;
    blobs.push(blob);
  }
  return { labels, blobs };
}

function addPixel(blob: Blob, col: number, row: number): void {
  blob.area++;
  blob.x += col;
  blob.y += row;
  if (col < blob.left) blob.left = col;
  if (col > blob.right) blob.right = col;
  if (row > blob.bottom) blob.bottom = row;
}
