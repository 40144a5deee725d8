import { applyHomography, type Homography, homographyThrough } from '../geometry/homography.ts';
import type { Frame, Point } from '../image.ts';
import { reduceGreen } from '../target/reduce.ts';
import { sampleLinearGreen } from '../target/sample.ts';
import { findRings, type RingCandidate } from './find-rings.ts';
import { onCircle, readScreenBits, timingPage } from './timing-page.ts';

/** Where the timing page lies in a photograph, and what it says of its screen. */
export interface FoundPage {
  /** Page units → image pixels. */
  readonly homography: Homography;
  /** ms, from the screen bits. */
  readonly frameTime: number;
  /** Level of a disc, 0 as dark and 1 as light as the page's rings. */
  level(x: number, y: number, radius: number): number;
}

/** Longest side of the plane in which rings are looked for: keeps rings of a twentieth of the frame over 20 pixels. */
const longestSide = 1200;
/** Share of a disc's radius that is read, clear of the blurred rim and of what lens distortion moves. */
const innerShare = 0.55;
/** The light rings must be this much lighter than the dark ones, in linear light of full scale. Our choice. */
const leastContrast = 0.04;

/** @returns null when four rings with a right checksum between them aren't there */
export function findPage(frame: Frame): FoundPage | null {
  const plane = reduceGreen(frame, longestSide);
  const rings = findRings(plane).map(({ x, y, size }) => ({
    x: x * plane.factor,
    y: y * plane.factor,
    size: size * plane.factor,
  }));
  for (const corners of quadrilaterals(rings)) {
    for (let turn = 0; turn < 4; turn++) {
      const turned = corners.map((_, i) => corners[(i + turn) % 4]!);
      const page = tryPage(frame, turned);
      if (page) return page;
    }
  }
  return null;
}

/** Convex fours of rings of like size, clockwise, the likeliest first: the page is larger than what its rings could make by chance. */
function quadrilaterals(rings: readonly RingCandidate[]): Point[][] {
  const fours: { corners: RingCandidate[]; area: number }[] = [];
  const count = rings.length;
  for (let a = 0; a < count; a++)
    for (let b = a + 1; b < count; b++)
      for (let c = b + 1; c < count; c++)
        for (let d = c + 1; d < count; d++) {
          const corners = clockwise([rings[a]!, rings[b]!, rings[c]!, rings[d]!]);
          const sizes = corners.map(({ size }) => size);
          const alike = Math.max(...sizes) < 3 * Math.min(...sizes);
          if (alike && isConvex(corners)) fours.push({ corners, area: areaOf(corners) });
        }
  return fours.sort((p, q) => q.area - p.area).map(({ corners }) => corners);
}

function clockwise(points: RingCandidate[]): RingCandidate[] {
  const x = points.reduce((sum, p) => sum + p.x, 0) / points.length;
  const y = points.reduce((sum, p) => sum + p.y, 0) / points.length;
  return points.sort((p, q) => Math.atan2(p.y - y, p.x - x) - Math.atan2(q.y - y, q.x - x));
}

function cross(a: Point, b: Point, c: Point): number {
  return (b.x - a.x) * (c.y - b.y) - (b.y - a.y) * (c.x - b.x);
}

function isConvex(corners: readonly Point[]): boolean {
  return corners.every((p, i) => cross(p, corners[(i + 1) % 4]!, corners[(i + 2) % 4]!) > 0);
}

function areaOf(corners: readonly Point[]): number {
  return corners.reduce((sum, p, i) => {
    const q = corners[(i + 1) % corners.length]!;
    return sum + (p.x * q.y - q.x * p.y) / 2;
  }, 0);
}

function tryPage(frame: Frame, corners: readonly Point[]): FoundPage | null {
  const homography = homographyThrough(timingPage.rings, corners);
  if (!homography) return null;
  const read = (x: number, y: number, radius: number) => meanIn(frame, homography, x, y, radius);
  const levels = ringLevels(read);
  if (!levels) return null;
  const level = (x: number, y: number, radius: number) => {
    const { dark, light } = levels(x, y);
    return Math.min(1, Math.max(0, (read(x, y, innerShare * radius) - dark) / (light - dark)));
  };
  const { count, radius, disc } = timingPage.screenBits;
  const bits = Array.from({ length: count }, (_, i) => {
    const { x, y } = onCircle(radius, i, count);
    return level(x, y, disc) > 0.5 ? 1 : 0;
  });
  const frameTime = readScreenBits(bits);
  return frameTime === null ? null : { homography, frameTime, level };
}

/** Mean linear light in a disc of the page; NaN where it leaves the frame. */
function meanIn(frame: Frame, h: Homography, x: number, y: number, radius: number): number {
  const steps = 3;
  let sum = 0;
  let count = 0;
  for (let i = -steps; i <= steps; i++)
    for (let j = -steps; j <= steps; j++) {
      if (i * i + j * j > steps * steps) continue;
      const at = applyHomography(h, x + (i * radius) / steps, y + (j * radius) / steps);
      sum += sampleLinearGreen(frame, at.x, at.y);
      count++;
    }
  return sum / count;
}

/** Light and dark anywhere on the page, from the four rings: screens look darker from the side, lenses darken corners. */
function ringLevels(
  read: (x: number, y: number, radius: number) => number,
): ((x: number, y: number) => { dark: number; light: number }) | null {
  const { dark: darkRadius, dot } = timingPage.ring;
  const middle = (darkRadius + dot) / 2;
  const corners = timingPage.rings.map(({ x, y }) => {
    const round = Array.from({ length: 8 }, (_, i) => onCircle(middle, i, 8));
    const dark = round.reduce((sum, p) => sum + read(x + p.x, y + p.y, 2) / 8, 0);
    return { dark, light: read(x, y, innerShare * dot) };
  });
  if (!corners.every(({ dark, light }) => light - dark > leastContrast)) return null;
  const side = timingPage.rings[1]!.x - timingPage.rings[0]!.x;
  return (x, y) => {
    const right = x / side + 0.5;
    const low = y / side + 0.5;
    const weights = [(1 - right) * (1 - low), right * (1 - low), right * low, (1 - right) * low];
    const mix = (pick: (c: (typeof corners)[number]) => number) =>
      corners.reduce((sum, corner, i) => sum + weights[i]! * pick(corner), 0);
    return { dark: mix((c) => c.dark), light: mix((c) => c.light) };
  };
}
