import type { Plane, Point } from '../image.ts';
import { deviationOf, doubleBoxBlur } from '../numeric/box-blur.ts';
import { samplePlane } from './sample.ts';

/** Something that looks like a station: a dark square in a lighter round pad on a ground between the two. */
export interface StationCandidate extends Point {
  /** Pixels of the plane a target unit. */
  readonly scale: number;
  /** (pad − square) / (pad + square) in codes. */
  readonly contrast: number;
}

const squareSide = 68; // target units, as every length below
const padRadius = 62;
// A Gaussian's second derivative answers a disc most when its deviation is the radius over √2; the square's disc has the same area.
const bestDeviation = squareSide / Math.sqrt(2 * Math.PI);
// Widths of the double box blurs, for the plane and for the plane halved: marks from 0.07 to 0.5 pixels a unit, which holds the target
// from a third of the frame's height to half as large again as the frame.
const fullWidths = [5, 7, 11];
const halvedWidths = [5, 7, 11, 17];
const leastAnswer = 0.03; // of the local mean; a station gives 0.08 and more, sensor noise less than 0.01
const mostPeaks = 500;
const rayCount = 32;

/**
 * Stations in a plane of codes, at any rotation; also some other things, which the pattern of all of them weeds out.
 * @param size large: only those that a target filling half of the frame's height or more has, in a quarter of the time; all: any
 */
export function findStations(plane: Plane, size: 'large' | 'all'): StationCandidate[] {
  const candidates: StationCandidate[] = [];
  for (const peak of findPeaks(plane, size)) {
    if (candidates.some((found) => liesIn(peak, found))) continue;
    const found = measureSquare(plane, peak, peak.deviation / bestDeviation);
    if (found && !candidates.some((other) => areSame(found, other))) candidates.push(found);
  }
  return candidates;
}

/** A quick look: lighter than the middle all round, where the pad is even if the peak's scale is a quarter off. */
function hasLighterRim(plane: Plane, { x, y, deviation }: Peak): boolean {
  const scale = deviation / bestDeviation;
  const level = 1.1 * samplePlane(plane, x, y);
  let darker = 0;
  for (let ray = 0; ray < rayCount; ray += 4) {
    const dx = scale * cosines[ray]!;
    const dy = scale * sines[ray]!;
    const near = samplePlane(plane, x + 46 * dx, y + 46 * dy);
    const far = samplePlane(plane, x + 64 * dx, y + 64 * dy);
    if (!(near > level || far > level)) darker++;
    if (darker > 1) return false;
  }
  return true;
}

interface Peak extends Point {
  readonly deviation: number;
  readonly answer: number;
}

/** Dark blobs in something lighter: maxima of the difference of two blurs, strongest first. */
function findPeaks(plane: Plane, size: 'large' | 'all'): Peak[] {
  const peaks: Peak[] = [];
  if (size === 'all') collectPeaks(plane, fullWidths, 1, peaks);
  collectPeaks(halve(plane), halvedWidths, 2, peaks);
  const rimmed = peaks.filter((peak) => hasLighterRim(plane, peak));
  return rimmed.sort((p, q) => q.answer - p.answer).slice(0, mostPeaks);
}

function collectPeaks(
  { width, height, data }: Plane,
  widths: readonly number[],
  pixel: number,
  peaks: Peak[],
): void {
  const buffer = new Float32Array(width * height);
  let narrow = doubleBoxBlur(data, width, height, widths[0]!, buffer);
  for (let level = 1; level < widths.length; level++) {
    const wide = doubleBoxBlur(data, width, height, widths[level]!, buffer);
    for (let i = 0; i < narrow.length; i++) narrow[i] = (wide[i]! - narrow[i]!) / (wide[i]! + 1e-3);
    const deviation = Math.sqrt(deviationOf(widths[level - 1]!) * deviationOf(widths[level]!));
    collectMaxima({ width, height, data: narrow }, deviation, pixel, peaks);
    narrow = wide;
  }
}

function halve({ width, height, data }: Plane): Plane {
  const half = { width: width >> 1, height: height >> 1 };
  const out = new Float32Array(half.width * half.height);
  for (let row = 0; row < half.height; row++) {
    let i = 2 * row * width;
    for (let col = 0; col < half.width; col++, i += 2) {
      out[row * half.width + col] =
        (data[i]! + data[i + 1]! + data[i + width]! + data[i + width + 1]!) / 4;
    }
  }
  return { ...half, data: out };
}

function collectMaxima(
  { width, height, data: answer }: Plane,
  deviation: number,
  pixel: number,
  peaks: Peak[],
): void {
  const reach = Math.max(1, Math.round(deviation / 2));
  for (let row = reach; row < height - reach; row++) {
    for (let col = reach; col < width - reach; col++) {
      const i = row * width + col;
      const value = answer[i]!;
      if (value < leastAnswer) continue;
      if (value < answer[i - 1]! || value <= answer[i + 1]!) continue;
      if (value < answer[i - width]! || value <= answer[i + width]!) continue;
      if (!isMaximum(answer, width, i, reach)) continue;
      peaks.push({
        x: (col + 0.5) * pixel,
        y: (row + 0.5) * pixel,
        deviation: deviation * pixel,
        answer: value,
      });
    }
  }
}

function isMaximum(answer: Float32Array, width: number, i: number, reach: number): boolean {
  const value = answer[i]!;
  for (let dy = -reach; dy <= reach; dy++) {
    for (let dx = -reach; dx <= reach; dx++) {
      if (answer[i + dy * width + dx]! > value) return false;
    }
  }
  return true;
}

/** On a square that is already found, whose middle answers at several scales and whose corners do too. */
function liesIn(peak: Peak, found: StationCandidate): boolean {
  return Math.hypot(peak.x - found.x, peak.y - found.y) < 0.6 * squareSide * found.scale;
}

function areSame(a: StationCandidate, b: StationCandidate): boolean {
  return Math.hypot(a.x - b.x, a.y - b.y) < padRadius * 0.6 * Math.max(a.scale, b.scale);
}

/** Centre and scale of the dark square from its outline at half level along rays, or null where there is none in a lighter pad. */
function measureSquare(plane: Plane, start: Point, startScale: number): StationCandidate | null {
  let centre = start;
  let scale = startScale;
  let outline: Outline | null = null;
  for (let pass = 0; pass < 2; pass++) {
    outline = traceOutline(plane, centre, scale);
    if (!outline) return null;
    const { area, x, y } = centroidOf(outline.radii);
    centre = { x: centre.x + x, y: centre.y + y };
    const next = Math.sqrt(area) / squareSide;
    if (next < scale / 2.2 || next > scale * 2.2) return null;
    scale = next;
  }
  if (!outline || !standsOnDarkerGround(plane, centre, scale, outline.inside)) return null;
  return { ...centre, scale, contrast: outline.contrast };
}

interface Outline {
  readonly radii: Float64Array;
  readonly inside: number;
  readonly contrast: number;
}

function traceOutline(plane: Plane, centre: Point, scale: number): Outline | null {
  const inside = samplePlane(plane, centre.x, centre.y);
  const step = Math.max(0.75, 4 * scale);
  const samples = Math.ceil((padRadius * scale) / step) + 1;
  const values = new Float32Array(rayCount * samples);
  const tops = new Float64Array(rayCount);
  for (let ray = 0; ray < rayCount; ray++) {
    const dx = cosines[ray]! * step;
    const dy = sines[ray]! * step;
    let top = 0;
    for (let k = 0; k < samples; k++) {
      const value = samplePlane(plane, centre.x + k * dx, centre.y + k * dy);
      values[ray * samples + k] = value;
      if (value > top) top = value;
    }
    tops[ray] = top;
  }
  const pad = tops.slice().sort()[rayCount >> 1]!;
  const contrast = (pad - inside) / (pad + inside);
  if (!(contrast > 0.08)) return null;
  const radii = crossings(values, samples, step, (inside + pad) / 2);
  return radii && { radii, inside, contrast };
}

/** Distance at which each ray first rises through the level; a few rays may miss it and take their neighbours'. */
function crossings(
  values: Float32Array,
  samples: number,
  step: number,
  level: number,
): Float64Array | null {
  const radii = new Float64Array(rayCount);
  let missing = 0;
  for (let ray = 0; ray < rayCount; ray++) {
    let k = 1;
    while (k < samples && !(values[ray * samples + k]! >= level)) k++;
    if (k === samples) {
      missing++;
      continue;
    }
    const before = values[ray * samples + k - 1]!;
    const after = values[ray * samples + k]!;
    radii[ray] = step * (k - 1 + (level - before) / (after - before));
  }
  if (missing > rayCount / 8) return null;
  const known = radii.filter((r) => r > 0).sort();
  const middle = known[known.length >> 1]!;
  // A square's outline reaches from half its side to half its diagonal; tilt and blur leave that within these bounds.
  if (known[0]! < 0.5 * middle || known.at(-1)! > 1.75 * middle) return null;
  for (let ray = 0; ray < rayCount; ray++) if (radii[ray] === 0) radii[ray] = middle;
  return radii;
}

function centroidOf(radii: Float64Array): Point & { area: number } {
  let area = 0;
  let x = 0;
  let y = 0;
  for (let ray = 0; ray < rayCount; ray++) {
    const r = radii[ray]!;
    area += r * r;
    x += r * r * r * cosines[ray]!;
    y += r * r * r * sines[ray]!;
  }
  return { x: (2 * x) / (3 * area), y: (2 * y) / (3 * area), area: (area * Math.PI) / rayCount };
}

/** Whether the pad ends: beyond it most directions fall back towards the ground. Discs on the bare ground fail here. */
function standsOnDarkerGround(plane: Plane, centre: Point, scale: number, inside: number): boolean {
  let seen = 0;
  let darker = 0;
  for (let ray = 0; ray < rayCount; ray++) {
    const read = (radius: number) =>
      samplePlane(
        plane,
        centre.x + cosines[ray]! * radius * scale,
        centre.y + sines[ray]! * radius * scale,
      );
    const ground = read(80);
    const pad = Math.max(read(46), read(51), read(56));
    if (Number.isNaN(ground) || Number.isNaN(pad)) continue;
    seen++;
    // Nominally the ground lies 58 % of the way from square to pad in sRGB codes.
    if (ground < pad - 0.2 * (pad - inside)) darker++;
  }
  return seen >= rayCount / 3 && darker >= 0.35 * seen;
}

const angles = Array.from({ length: rayCount }, (_, ray) => (2 * Math.PI * ray) / rayCount);
const cosines = Float64Array.from(angles, Math.cos);
const sines = Float64Array.from(angles, Math.sin);
