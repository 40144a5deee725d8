import type { Frame } from '../image.ts';
import { normalCdf, normalQuantile } from '../numeric/normal.ts';
import { type DarkStatistics, gatherDark, tile } from './dark-statistics.ts';
import { invented, sampleNoise } from './noise-tail.ts';

export interface HotPixel {
  /** Column and row of the brightest pixel. */
  readonly x: number;
  readonly y: number;
  /** Codes above the neighbourhood, of the channel that stands out most. */
  readonly height: number;
  /** Height over its threshold, in standard deviations of the noise. */
  readonly margin: number;
}

export interface HotPixelOptions {
  /** As gathered already. */
  readonly statistics?: DarkStatistics;
  /** Codes of 255 above the neighbourhood below which nothing counts. Default 0: the noise alone decides. */
  readonly least?: number;
}

/** A pixel of 6 σ is to be found. */
const highest = 5.95;
/** Codes of 255 above the neighbourhood that count in any case. */
const least = 2;
/** Pixels within which a hot pixel and what demosaicing or JPEG smear of it count as one. */
const reach = 2;
const reachInJpeg = 4;
/** JPEG rings through a whole block; what rings stays below this share of the pixel itself. */
const ringing = 0.5;

/**
 * Pixels of a lens-cap frame that stand out of their neighbourhood, in any channel or in all together, brightest first. Threshold: 6 σ
 * of the local noise at most, as much more as the noise's own tail asks for. In a JPEG a pixel's smear over its block counts with it,
 * so that the count is a lower bound. Common practice, no standard; nearest is EMVA 1288's logarithmic histogram of defect pixels.
 */
export function findHotPixels(frame: Frame, options: HotPixelOptions = {}): HotPixel[] {
  const { statistics = gatherDark(frame) } = options;
  const scan = prepare(frame, statistics, options.least ?? 0);
  const found: HotPixel[] = [];
  const { width, height } = frame;
  const { columns, rows } = statistics;
  for (let row = 0; row < rows; row++) {
    const bottom = row === rows - 1 ? height : (row + 1) * tile;
    for (let y = row * tile; y < bottom; y++)
      for (let col = 0; col < columns; col++) {
        const right = col === columns - 1 ? width : (col + 1) * tile;
        scanPiece(scan, found, y, col * tile, right, row * columns + col);
      }
  }
  return mergeSmear(frame, found);
}

/**
 * Hot pixels that stand out in every frame (of three and more: in all but one at most), which tells a defect from noise and from a
 * particle's hit.
 */
export function persistentHotPixels(
  frames: readonly Frame[],
  options: Pick<HotPixelOptions, 'least'> = {},
): HotPixel[] {
  const each = frames.map((frame) => findHotPixels(frame, options));
  const wanted = frames.length > 2 ? frames.length - 1 : frames.length;
  const known: HotPixel[] = [];
  for (const pixel of each.flat().toSorted((a, b) => b.height - a.height)) {
    const near = (other: HotPixel) =>
      Math.max(Math.abs(other.x - pixel.x), Math.abs(other.y - pixel.y)) <= reach;
    if (!known.some(near) && each.filter((pixels) => pixels.some(near)).length >= wanted)
      known.push(pixel);
  }
  return known;
}

/** Standard uncertainty of the count: each pixel is in it by the chance that its noise left it above the threshold. */
export function countUncertainty(pixels: readonly { readonly margin: number }[]): number {
  const variance = pixels.reduce((sum, { margin }) => {
    const p = normalCdf(margin);
    return sum + p * (1 - p);
  }, 0);
  return Math.sqrt(variance);
}

interface Scan {
  readonly frame: Frame;
  readonly statistics: DarkStatistics;
  /** Codes below which a pixel of the tile can't be hot: one channel, and the sum. */
  readonly one: Float64Array;
  readonly all: Float64Array;
  /** Noise of one channel over that of the sum. */
  readonly share: number;
  /** Thresholds in σ. */
  readonly factors: { readonly one: number; readonly all: number };
  readonly least: number;
}

function prepare(frame: Frame, statistics: DarkStatistics, asked: number): Scan {
  const scale = frame.maxCode / 255;
  const noise = sampleNoise(frame, statistics);
  const pixels = frame.width * frame.height;
  const plain = Math.min(highest, -normalQuantile(invented / pixels / 4));
  const factors = { one: plain * noise.oneTail, all: plain * noise.allTail };
  const floor = Math.max(asked * scale - 0.1, noise.inBlack ?? least * scale);
  const one = new Float64Array(statistics.mean.length);
  const all = new Float64Array(statistics.mean.length);
  const share = noise.all > 0 ? noise.one / noise.all : 1 / 3;
  // The quick look allows for glow within a tile and for what the neighbourhood's own mean adds.
  const slack = 0.8;
  for (let t = 0; t < one.length; t++) {
    const sigma = Math.max(statistics.deviation[t]!, 0.5 * noise.all);
    const level = statistics.mean[t]! / 3;
    one[t] = level + slack * Math.max(floor, factors.one * sigma * share);
    all[t] = 3 * level + slack * Math.max(3 * floor, factors.all * sigma);
  }
  return { frame, statistics, one, all, share, factors, least: floor };
}

/** The quick look at a piece of a row that lies in one tile. */
function scanPiece(
  scan: Scan,
  found: HotPixel[],
  y: number,
  left: number,
  right: number,
  t: number,
): void {
  const { data, width } = scan.frame;
  const one = scan.one[t]!;
  const all = scan.all[t]!;
  const start = y * width;
  for (let at = (start + left) * 3; at < (start + right) * 3; at += 3) {
    const r = data[at]!;
    const g = data[at + 1]!;
    const b = data[at + 2]!;
    if (r < one && g < one && b < one && r + g + b < all) continue;
    const pixel = judge(scan, at / 3 - start, y, t);
    if (pixel) found.push(pixel);
  }
}

/** The exact look at a pixel that the quick one let through: against its neighbourhood, with its row's and column's own offset. */
function judge(scan: Scan, x: number, y: number, t: number): HotPixel | null {
  const { frame, statistics, factors } = scan;
  const around = neighbourhood(frame, statistics, x, y);
  const at = (y * frame.width + x) * 3;
  const codes = [frame.data[at]!, frame.data[at + 1]!, frame.data[at + 2]!];
  const sigma = Math.max(statistics.deviation[t]!, 1e-9);
  const raised = around.offset / 3 + withoutTop * sigma * scan.share;
  const excess = codes.map((code, c) => code - around.level[c]! - raised);
  const together = excess[0]! + excess[1]! + excess[2]!;
  const tallest = Math.max(...excess);
  const byOne = tallest - Math.max(scan.least, factors.one * sigma * scan.share);
  const byAll = together - Math.max(3 * scan.least, factors.all * sigma);
  if (byOne < 0 && byAll < 0) return null;
  const margin = Math.max(byOne / (sigma * scan.share), byAll / sigma);
  return { x, y, height: tallest, margin };
}

/** What leaving out the largest twentieth of normal numbers takes from their mean, in σ: φ(1.645) / 0.95. */
const withoutTop = 0.1086;
const outer = 8;
const inner = 2;

/** Mean of each channel about a pixel, a hot neighbour held down, and how its row and column differ from those about them. */
function neighbourhood(
  { data, width, height }: Frame,
  { rowMean, columnMean }: DarkStatistics,
  x: number,
  y: number,
): { level: [number, number, number]; offset: number } {
  const values: [number[], number[], number[]] = [[], [], []];
  let offset = 0;
  for (let row = Math.max(0, y - outer); row <= Math.min(height - 1, y + outer); row++)
    for (let col = Math.max(0, x - outer); col <= Math.min(width - 1, x + outer); col++) {
      if (Math.max(Math.abs(row - y), Math.abs(col - x)) <= inner) continue;
      const at = (row * width + col) * 3;
      for (let c = 0; c < 3; c++) values[c]!.push(data[at + c]!);
      offset += rowMean[y]! - rowMean[row]! + columnMean[x]! - columnMean[col]!;
    }
  const level = values.map(meanWithoutTop) as [number, number, number];
  return { level, offset: offset / values[0].length };
}

/** Without the largest twentieth, among which other hot pixels are. */
function meanWithoutTop(values: number[]): number {
  const sorted = values.sort((a, b) => a - b);
  const kept = sorted.slice(0, Math.max(1, Math.floor(sorted.length * 0.95)));
  return kept.reduce((sum, v) => sum + v, 0) / kept.length;
}

/** Tallest first; a pixel near a taller one, or in the same JPEG block and much lower, is the other's smear. */
function mergeSmear(frame: Frame, found: readonly HotPixel[]): HotPixel[] {
  const jpeg = frame.blockStep !== undefined;
  const near = jpeg ? reachInJpeg : reach;
  const block = frame.chromaHalved ? 16 : 8;
  const cells = new Map<string, HotPixel[]>();
  const key = (x: number, y: number) => `${Math.floor(x / 16)},${Math.floor(y / 16)}`;
  const kept: HotPixel[] = [];
  for (const pixel of found.toSorted((a, b) => b.height - a.height)) {
    const { x, y, height } = pixel;
    const around = [-16, 0, 16].flatMap((dy) =>
      [-16, 0, 16].flatMap((dx) => cells.get(key(x + dx, y + dy)) ?? []),
    );
    const smear = around.some((other) => {
      if (Math.max(Math.abs(other.x - x), Math.abs(other.y - y)) <= near) return true;
      const shared =
        Math.floor(other.x / block) === Math.floor(x / block) &&
        Math.floor(other.y / block) === Math.floor(y / block);
      return jpeg && shared && height < ringing * other.height;
    });
    if (smear) continue;
    kept.push(pixel);
    const cell = key(x, y);
    cells.set(cell, [...(cells.get(cell) ?? []), pixel]);
  }
  return kept;
}
