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
    histogram: coarsen(luminance, count, (bin) => toCode((bin + 0.5) / fine)),
    histogramByChannel: {
      red: coarsen(channels[0], count, (code) => code / frame.maxCode),
      green: coarsen(channels[1], count, (code) => code / frame.maxCode),
      blue: coarsen(channels[2], count, (code) => code / frame.maxCode),
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
 * Four pixels at a time: in a word w with bytes below 256, adding 2 to the low seven bits of each byte sets its top bit
 * just when they are 126 or 127, so the test marks bytes of 254 and 255; on the complement it marks 0 and 1.
 */
function countClippedBytes(data: Uint8Array): Clipped {
  const words = new Uint32Array(data.buffer, data.byteOffset, data.length >> 2);
  const blocks = Math.floor(words.length / 3);
  const total: Clipped = { highlights: 0, shadows: 0 };
  for (let block = 0; block < blocks; block++) {
    const a = words[block * 3]!;
    const b = words[block * 3 + 1]!;
    const c = words[block * 3 + 2]!;
    const top = (carry(a) & a) | (carry(b) & b) | (carry(c) & c);
    const bottom = (carry(~a) & ~a) | (carry(~b) & ~b) | (carry(~c) & ~c);
    if (((top | bottom) & 0x80808080) === 0) continue;
    addClipped(total, data, block * 12, block * 12 + 12, 255);
  }
  addClipped(total, data, blocks * 12, data.length, 255);
  return total;
}

function carry(word: number): number {
  return (word & 0x7f7f7f7f) + 0x02020202;
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
  luminance: Uint32Array;
  channels: [Uint32Array, Uint32Array, Uint32Array];
  count: number;
}

function sampleHistograms(frame: Frame): Histograms {
  const { data, maxCode, width, height } = frame;
  const luminance = new Uint32Array(fine);
  const channel = () => new Uint32Array(maxCode + 1);
  const [red, green, blue] = [channel(), channel(), channel()];
  const weights = luminanceWeights(frame);
  const weigh = (i: number) =>
    frame.toLinear[i]!.map((linear) => linear * weights[i]! * (fine - 1));
  const [redLight, greenLight, blueLight] = [weigh(0), weigh(1), weigh(2)];
  const step = 3 * sampleStride(width, width * height);
  let count = 0;
  for (let i = 0; i < data.length; i += step) {
    const r = data[i]!;
    const g = data[i + 1]!;
    const b = data[i + 2]!;
    red[r]!++;
    green[g]!++;
    blue[b]!++;
    const bin = (redLight[r]! + greenLight[g]! + blueLight[b]!) | 0;
    luminance[bin < 0 ? 0 : bin < fine ? bin : fine - 1]!++;
    count++;
  }
  return { luminance, channels: [red, green, blue], count };
}

/** A stride that shares no factor with the width, so that the sample doesn't stand in columns. */
function sampleStride(width: number, pixels: number): number {
  let stride = Math.max(1, Math.floor(pixels / enoughPixels));
  while (divisor(stride, width) > 1) stride++;
  return stride;
}

function divisor(a: number, b: number): number {
  return b === 0 ? a : divisor(b, a % b);
}

function medianOf(luminance: Uint32Array, count: number): { median: number; uncertainty: number } {
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

function coarsen(counts: Uint32Array, total: number, code: (index: number) => number): number[] {
  const shares = new Array<number>(bins).fill(0);
  counts.forEach((n, index) => {
    if (n > 0) shares[Math.min(bins - 1, Math.floor(code(index) * bins))]! += n / total;
  });
  return shares;
}
