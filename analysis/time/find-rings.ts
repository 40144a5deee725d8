import type { Plane, Point } from '../image.ts';
import { type Blob, labelBlobs } from '../numeric/label-blobs.ts';

/** A dark ring with a light dot in its middle, as a candidate for a corner of the timing page. */
export interface RingCandidate extends Point {
  /** Mean of the ring's width and height, plane pixels. */
  readonly size: number;
}

/** Codes of full scale at which the plane is cut in light and dark: lit and dark discs lie on both sides from −1.5 to +1.5 EV. */
const thresholds = [0.2, 0.35, 0.5, 0.68, 0.85];
const fewestPixels = 5;
const mostRings = 12;

/**
 * Rings in a plane of codes 0…1, largest first. The rings' size over the dot's is 2 on the page; blur and glare change it.
 * All limits are our choice: wide, because the page's checksum rules out what isn't a page.
 */
export function findRings(plane: Plane): RingCandidate[] {
  const found: RingCandidate[] = [];
  for (const threshold of thresholds) {
    const { labels, blobs } = labelBlobs(plane, threshold);
    for (const dot of blobs) {
      if (!isDot(plane, dot)) continue;
      const outside = labels[dot.firstRow * plane.width + dot.firstCol - 1]!;
      const ring = blobs[outside]!;
      if (!isRingOf(plane, ring, dot)) continue;
      const size = (widthOf(ring) + heightOf(ring)) / 2;
      const known = found.some((other) => Math.hypot(other.x - dot.x, other.y - dot.y) < size / 4);
      if (!known) found.push({ x: dot.x, y: dot.y, size });
    }
  }
  return found.sort((a, b) => b.size - a.size).slice(0, mostRings);
}

const widthOf = (blob: Blob) => blob.right - blob.left + 1;
const heightOf = (blob: Blob) => blob.bottom - blob.top + 1;

function isDot(plane: Plane, blob: Blob): boolean {
  return blob.light && blob.area >= fewestPixels && isWhole(plane, blob) && isRound(blob);
}

function isWhole({ width, height }: Plane, { left, right, top, bottom }: Blob): boolean {
  return left > 0 && top > 0 && right < width - 1 && bottom < height - 1;
}

function isRound(blob: Blob): boolean {
  const aspect = widthOf(blob) / heightOf(blob);
  return aspect > 0.4 && aspect < 2.5;
}

function isRingOf(plane: Plane, ring: Blob, dot: Blob): boolean {
  if (ring.light || !isWhole(plane, ring) || !isRound(ring)) return false;
  const width = widthOf(ring);
  const height = heightOf(ring);
  const across = width / widthOf(dot);
  const down = height / heightOf(dot);
  const fills = (ring.area + dot.area) / (width * height);
  return (
    across > 1.3 &&
    across < 4 &&
    down > 1.3 &&
    down < 4 &&
    fills > 0.55 &&
    fills < 0.95 &&
    Math.abs(ring.x - dot.x) < 0.12 * width + 0.5 &&
    Math.abs(ring.y - dot.y) < 0.12 * height + 0.5
  );
}
