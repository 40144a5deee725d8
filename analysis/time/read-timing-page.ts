import { MeasurementError } from '../errors.ts';
import type { Frame } from '../image.ts';
import { type FoundPage, findPage } from './find-page.ts';
import { cycleFrames, frameBitDiscs, frameBits, onCircle, timingPage } from './timing-page.ts';

export interface PageReading {
  /** The screen's frame time as the page states it, ms. */
  readonly frameTime: number;
  /**
   * From the hand's passing the mark to the start of the exposure, ms; the nearer way round the cycle, so that a photograph taken
   * before the mark is negative. A screen holds each frame for its whole time, and so does the hand: what frame k shows stands for
   * k frame times.
   */
  readonly elapsed: number;
  /** How long the shutter was open, in frames of the screen: from the metadata when told, else as the discs show it. */
  readonly exposureFrames: number;
}

/** Beyond this share of the cycle the mark lies ahead. Leaves 3.4 s for the slowest camera and 0.6 s for a hasty finger. */
const aheadFrom = 0.85;
/** Frames by which code and hand may differ: lens distortion moves the hand by as much. Our choice. */
const handSlack = 6;
/** Root mean square misfit of the discs' levels that still counts as read; half-tones are squeezed by the camera's tone curve. */
const mostMisfit = 0.2;
const step = 0.1;
const lengths = [0.02, 0.25, 0.5, 1, 1.5, 2, 3, 4, 6, 8, 12];

/**
 * Reads the running timing page from a photograph, at any turn and tilt to 30°, over- or under-exposed by 1.5 EV.
 * The discs' levels are compared with what each start and length of exposure would have mixed; the hand says which part of the cycle
 * to look in, so that a misread disc can't put the time far off.
 * @param exposureTime s, from the metadata, or null
 * @throws MeasurementError no-timing-page, timing-page-unclear
 */
export function readTimingPage(frame: Frame, exposureTime: number | null): PageReading {
  const page = findPage(frame);
  if (!page) {
    throw new MeasurementError(
      'no-timing-page',
      'The timing page was not found. Show all of it with its four rings, in focus, larger than a third of the picture’s height.',
    );
  }
  const { frameTime } = page;
  const frames = cycleFrames(frameTime);
  const hand = readHand(page, frames);
  const bits = readFrameBits(page);
  const told = exposureTime === null ? null : (exposureTime * 1000) / frameTime;
  const best = hand === null ? null : matchCode(bits, frames, hand, told);
  if (!best || !(best.misfit <= mostMisfit)) {
    throw new MeasurementError(
      'timing-page-unclear',
      'The timing page was found, but its discs can’t be told apart. Use a shorter exposure time, keep reflections off the screen and focus on it.',
    );
  }
  const cycles = (best.start - 0.5) / frames;
  const wrapped = cycles >= aheadFrom ? cycles - 1 : cycles;
  return { frameTime, elapsed: wrapped * frames * frameTime, exposureFrames: best.length };
}

/** Share of the exposure for which each bit was 1, as far as the tone curve lets it tell: both discs have their say. */
function readFrameBits(page: FoundPage): number[] {
  const { count, radius, disc } = timingPage.frameBits;
  return Array.from({ length: count }, (_, bit) => {
    const [one, zero] = frameBitDiscs(bit).map((index) => {
      const { x, y } = onCircle(radius, index, 2 * count);
      return page.level(x, y, disc);
    }) as [number, number];
    return (one + 1 - zero) / 2;
  });
}

/** The middle of the hand's trace, in frames since the mark, or null where no hand is seen. */
function readHand(page: FoundPage, frames: number): number | null {
  const { radius, disc } = timingPage.hand;
  const count = 180;
  const levels = Array.from({ length: count }, (_, i) => {
    const { x, y } = onCircle(radius, i, count);
    return page.level(x, y, disc / 2);
  });
  const ground = levels.toSorted((a, b) => a - b)[count >> 1]!;
  const highest = Math.max(...levels);
  if (!(highest - ground > 0.1)) return null;
  let sine = 0;
  let cosine = 0;
  levels.forEach((level, i) => {
    const weight = Math.max(0, level - ground - 0.3 * (highest - ground));
    sine += weight * Math.sin((2 * Math.PI * i) / count);
    cosine += weight * Math.cos((2 * Math.PI * i) / count);
  });
  return (Math.atan2(sine, cosine) / (2 * Math.PI)) * frames;
}

interface Match {
  /** Start and length of the exposure in frames; start in 0…frames. */
  start: number;
  length: number;
  misfit: number;
}

function matchCode(
  bits: readonly number[],
  frames: number,
  hand: number,
  told: number | null,
): Match | null {
  const tried = told === null ? lengths : [Math.max(0.02, told), ...lengths];
  // Another length must pay for its freedom, or noise would lengthen short exposures; against what the metadata tell, more dearly.
  const gain = told === null ? 0.9 : 0.35;
  let best: Match | null = null;
  for (const length of tried) {
    const match = matchLength(bits, frames, hand, length);
    if (!best || match.misfit < gain * best.misfit - 0.005) best = match;
  }
  return best;
}

/** The best start for one length; where several are as good, their middle. */
function matchLength(bits: readonly number[], frames: number, hand: number, length: number): Match {
  const from = hand + 0.5 - length / 2 - handSlack;
  const count = Math.round((2 * handSlack) / step);
  const codes = codesFrom(Math.floor(from), Math.ceil(2 * handSlack + length) + 2, frames);
  const misfits = Array.from({ length: count + 1 }, (_, i) => {
    const start = from + i * step - Math.floor(from);
    return misfitOf(bits, codes, start, length);
  });
  const misfit = Math.min(...misfits);
  let sum = 0;
  let good = 0;
  misfits.forEach((value, i) => {
    if (value > misfit + 0.01) return;
    sum += i;
    good++;
  });
  const start = from + (sum / good) * step;
  return { start: ((start % frames) + frames) % frames, length, misfit };
}

function codesFrom(first: number, count: number, frames: number): number[][] {
  return Array.from({ length: count }, (_, i) => frameBits(first + i, frames));
}

/** Root mean square over the bits of what an exposure from `start` (frames after the first code) would show less what is seen. */
function misfitOf(
  bits: readonly number[],
  codes: readonly number[][],
  start: number,
  length: number,
): number {
  const end = start + length;
  let squares = 0;
  bits.forEach((seen, bit) => {
    let share = 0;
    for (let k = Math.floor(start); k < end; k++) {
      const open = Math.min(k + 1, end) - Math.max(k, start);
      share += (open / length) * (codes[k]?.[bit] ?? 0);
    }
    squares += (share - seen) ** 2;
  });
  return Math.sqrt(squares / bits.length);
}
