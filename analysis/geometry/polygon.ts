import type { Point } from '../image.ts';

/** Area of a polygon, by the shoelace formula; positive whichever way round. */
export function polygonArea(points: readonly Point[]): number {
  let sum = 0;
  for (let i = 0; i < points.length; i++) {
    const p = points[i]!;
    const q = points[(i + 1) % points.length]!;
    sum += p.x * q.y - q.x * p.y;
  }
  return Math.abs(sum) / 2;
}

/** Area of the part of a polygon that lies in the frame: cut off at one border after another (Sutherland & Hodgman, CACM 17 (1974) 32). */
export function polygonAreaInFrame(
  points: readonly Point[],
  frame: { readonly width: number; readonly height: number },
): number {
  let rest = [...points];
  rest = cut(rest, (p) => p.x);
  rest = cut(rest, (p) => frame.width - p.x);
  rest = cut(rest, (p) => p.y);
  rest = cut(rest, (p) => frame.height - p.y);
  return polygonArea(rest);
}

/** Keeps the part where `depth` is positive. */
function cut(points: readonly Point[], depth: (p: Point) => number): Point[] {
  const kept: Point[] = [];
  for (let i = 0; i < points.length; i++) {
    const p = points[i]!;
    const q = points[(i + 1) % points.length]!;
    const dp = depth(p);
    const dq = depth(q);
    if (dp >= 0) kept.push(p);
    if (dp >= 0 !== dq >= 0) {
      const share = dp / (dp - dq);
      kept.push({ x: p.x + share * (q.x - p.x), y: p.y + share * (q.y - p.y) });
    }
  }
  return kept;
}
