import { luminanceWeights } from '../colour/frame-colour.ts';
import { toCode } from '../colour/srgb.ts';
import type { Frame } from '../image.ts';
import type { Plots } from '../result.ts';

export interface FrameLight {
  /** Median luminance in the file's linear light, and its standard uncertainty. */
  readonly median: number;
  readonly medianUncertainty: number;
  /** % of pixels with any channel at 254 of 255 or more, and with all channels at 1 or less. */
  readonly clippedHighlights: number;
  readonly clippedShadows: number;
  readonly pixels: number;
  readonly histogram: Plots['histogram'];
  readonly histogramByChannel: Plots['histogramByChannel'];
}

const bins = 64;
/** Steps of luminance in the fine histogram, 0…1. */
const fine = 1 << 15;
/** More pixels than this don't change a median; clipping is counted on every one. */
const enoughPixels = 1e6;

/**
 * One look over the whole frame: clipping on every pixel, median and histograms on an even sample of a million or more.
 * Clipping: common practice, no source; 254 counts because JPEG's ringing makes 255 alone an underestimate.
 */
export function measureFrame(frame: Frame): FrameLight {
  const pixels = frame.width * frame.height;
  const clipped = countClipped(frame);
  const { luminance, channels, count } = sampleHistograms(frame);
  const { median, uncertainty } = medianOf(luminance, count);
  return {
    median,
    medianUncertainty: uncertainty,
    clippedHighlights: (100 * clipped.highlights) / pixels,
    clippedShadows: (100 * clipped.shadows) / pixels,
    pixels,
    histogram: coarsenLight(luminance, count),
    histogramByChannel: {
      red: coarsen(channels[0], count),
      green: coarsen(channels[1], count),
      blue: coarsen(channels[2], count),
    },
  };
}

interface Clipped {
  highlights: number;
  shadows: number;
}

function countClipped(frame: Frame): Clipped {
  const { data } = frame;
  if (data instanceof Uint8Array && data.byteOffset % 4 === 0) return countClippedBytes(data);
  const total: Clipped = { highlights: 0, shadows: 0 };
  addClipped(total, data, 0, data.length, frame.maxCode);
  return total;
}

/**
 * Eight pixels at a time, in six words. A byte is 0, 1, 254 or 255 just when its top seven bits are alike, that is when bits 1 to 6
 * of it and of itself shifted by one differ nowhere. `spread` sets the top bit of every byte in which they do.
 */
function countClippedBytes(data: Uint8Array): Clipped {
  const words = new Int32Array(data.buffer, data.byteOffset, data.length >> 2);
  const end = words.length - (words.length % 6);
  const total: Clipped = { highlights: 0, shadows: 0 };
  for (let word = 0; word < end; word += strip)
    countStrip(total, data, words, word, Math.min(end, word + strip));
  addClipped(total, data, 4 * end, data.length, 255);
  return total;
}

/** Words looked at in one call, of which there are then enough for the compiler to take the function on as a whole. */
const strip = 6 * 4096;

function countStrip(
  total: Clipped,
  data: Uint8Array,
  words: Int32Array,
  from: number,
  to: number,
): void {
  for (let word = from; word < to; word += 6) {
    const first = spread(words[word]!) & spread(words[word + 1]!) & spread(words[word + 2]!);
    const second = spread(words[word + 3]!) & spread(words[word + 4]!) & spread(words[word + 5]!);
    if ((first & second & topBits) === topBits) continue;
    addClipped(total, data, 4 * word, 4 * word + 24, 255);
  }
}

const topBits = 0x80808080 | 0;

/** No sum passes its byte: at most 0x7e + 0x7e. */
function spread(word: number): number {
  return (((word ^ (word >>> 1)) & 0x7e7e7e7e) + 0x7e7e7e7e) | 0;
}

function addClipped(
  total: Clipped,
  data: Frame['data'],
  from: number,
  to: number,
  maxCode: number,
): void {
  const low = Math.round(maxCode / 255);
  const high = maxCode - low;
  for (let i = from; i < to; i += 3) {
    const r = data[i]!;
    const g = data[i + 1]!;
    const b = data[i + 2]!;
    if (r >= high || g >= high || b >= high) total.highlights++;
    else if (r <= low && g <= low && b <= low) total.shadows++;
  }
}

interface Histograms {
  luminance: Int32Array;
  channels: [Int32Array, Int32Array, Int32Array];
  count: number;
}

type Weighed = readonly [Float32Array, Float32Array, Float32Array];

function sampleHistograms(frame: Frame): Histograms {
  const { maxCode, width, height } = frame;
  const channel = () => new Int32Array(maxCode + 1);
  const histograms: Histograms = {
    luminance: new Int32Array(fine),
    channels: [channel(), channel(), channel()],
    count: 0,
  };
  const weights = luminanceWeights(frame);
  const weigh = (i: number) =>
    frame.toLinear[i]!.map((linear) => linear * weights[i]! * (fine - 1));
  const lights: Weighed = [weigh(0), weigh(1), weigh(2)];
  const { rowStep, colStep } = sampleSteps(width, height);
  for (let row = rowStep >> 1, n = 0; row < height; row += rowStep, n++) {
    // Each row begins elsewhere, so that the sample doesn't stand in columns.
    const from = (row * width + (n % colStep)) * 3;
    sampleRow(histograms, frame.data, from, (row + 1) * width * 3, 3 * colStep, lights);
  }
  return histograms;
}

/** By itself, because a function that is called often is compiled as a whole. */
function sampleRow(
  histograms: Histograms,
  data: Frame['data'],
  from: number,
  to: number,
  step: number,
  [redLight, greenLight, blueLight]: Weighed,
): void {
  const { luminance, channels } = histograms;
  const [red, green, blue] = channels;
  const last = fine - 1;
  let count = 0;
  for (let i = from; i < to; i += step) {
    const r = data[i]!;
    const g = data[i + 1]!;
    const b = data[i + 2]!;
    red[r]!++;
    green[g]!++;
    blue[b]!++;
    const bin = (redLight[r]! + greenLight[g]! + blueLight[b]!) | 0;
    luminance[bin < 0 ? 0 : Math.min(bin, last)]!++;
    count++;
  }
  histograms.count += count;
}

/** Whole rows are left out where they can be: what makes a sample of a large frame slow is to fetch its rows. */
function sampleSteps(width: number, height: number): { rowStep: number; colStep: number } {
  const stride = Math.max(1, Math.floor((width * height) / enoughPixels));
  const rowStep = Math.ceil(Math.sqrt(stride));
  return { rowStep, colStep: Math.max(1, Math.floor(stride / rowStep)) };
}

function medianOf(luminance: Int32Array, count: number): { median: number; uncertainty: number } {
  const quantile = (share: number) => {
    const wanted = share * count;
    let before = 0;
    for (let bin = 0; bin < fine; bin++) {
      const n = luminance[bin]!;
      if (before + n >= wanted) return (bin + (wanted - before) / n) / fine;
      before += n;
    }
    return 1;
  };
  // A median of n values lies between the order statistics n/2 ± √n/2 with the chance of one standard deviation.
  const spread = 0.5 / Math.sqrt(count);
  const uncertainty = (quantile(0.5 + spread) - quantile(0.5 - spread)) / 2;
  return { median: quantile(0.5), uncertainty: Math.max(uncertainty, 0.5 / fine) };
}

function coarsen(counts: Int32Array, total: number): number[] {
  const shares = new Array<number>(bins).fill(0);
  const scale = bins / (counts.length - 1);
  for (let code = 0; code < counts.length; code++) {
    shares[Math.min(bins - 1, Math.floor(code * scale))]! += counts[code]! / total;
  }
  return shares;
}

/** Bins even in codes, from light's: where each ends is found once, as the way from light to code is slow. */
function coarsenLight(counts: Int32Array, total: number): number[] {
  const shares = new Array<number>(bins).fill(0);
  for (let i = 0; i < fine; i++) shares[coarseBin[i]!]! += counts[i]! / total;
  return shares;
}

const coarseBin = Uint8Array.from({ length: fine }, (_, i) =>
  Math.min(bins - 1, Math.floor(toCode((i + 0.5) / fine) * bins)),
);
