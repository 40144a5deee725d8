import type { Frame } from '../image.ts';
import { type DarkStatistics, tile } from './dark-statistics.ts';

/** Expected number of pixels that noise alone lifts over the threshold, the frame over. Our choice. */
export const invented = 0.004;
/** Share of zeros from which the deviation says nothing of the noise. */
const mostlyBlack = 0.9;
/** Codes of 255 that count when black is cut away so that little noise is seen. */
const leastInBlack = 3;

/** Deviations over a dark frame, and how much farther the noise's tail reaches than a normal one's. */
export function sampleNoise(
  frame: Frame,
  { mean, deviation, columns, rows }: DarkStatistics,
): { one: number; all: number; oneTail: number; allTail: number; inBlack: number | null } {
  const { width, data, maxCode } = frame;
  const codes = new Float64Array(maxCode + 1);
  const [one, all] = [createTally(), createTally()];
  const middle = Float64Array.from(deviation).sort()[deviation.length >> 1]!;
  const step = Math.max(1, Math.floor((rows * tile) / 700));
  const sigma = Math.max(middle, 1e-9);
  for (let y = 0; y < Math.min(frame.height, rows * tile); y += step)
    for (let x = 0; x < Math.min(width, columns * tile); x++) {
      const t = Math.floor(y / tile) * columns + Math.floor(x / tile);
      const at = (y * width + x) * 3;
      const [r, g, b] = [data[at]!, data[at + 1]!, data[at + 2]!];
      const own = Math.max(deviation[t]!, 0.5 * sigma);
      addTo(all, (r + g + b - mean[t]!) / own);
      for (const code of [r, g, b]) {
        codes[code]!++;
        addTo(one, (3 * code - mean[t]!) / own);
      }
    }
  return {
    one: (middle * deviationOf(one)) / 3,
    all: middle,
    oneTail: tailOf(one),
    allTail: tailOf(all),
    inBlack: codes[0]! > mostlyBlack * one.total ? reachInBlack(codes, maxCode / 255, step) : null,
  };
}

/**
 * Height above black, in codes, that noise reaches when most of it is cut away: the numbers of pixels at the first three codes of 255
 * carried on, as a parabola of their logarithms (a normal tail) or straight where the third is too rare to tell.
 */
function reachInBlack(codes: Float64Array, scale: number, step: number): number {
  const count = (code: number) => {
    let sum = 0;
    for (let c = (code - 0.5) * scale; c < (code + 0.5) * scale; c++)
      sum += codes[Math.ceil(c)] ?? 0;
    return sum * step;
  };
  const [one, two, three] = [count(1), count(2), count(3)];
  let code = leastInBlack;
  if (one > 0 && two > 0) {
    let slope = Math.log(two / one);
    const bend = three > 20 ? Math.min(0, Math.log(three / two) - slope) : 0;
    let expected = Math.log(two);
    for (let k = 3; k < 60 && (k <= leastInBlack || expected > Math.log(invented)); k++) {
      slope = Math.min(slope + bend, -0.2);
      expected += slope;
      code = expected > Math.log(invented) ? k + 1 : code;
    }
  }
  return (code - 0.1) * scale;
}

/** Histogram of values in 400 steps of 1/10 from 0 up; below 0 only counted. */
interface Tally {
  readonly counts: Float64Array;
  total: number;
  squares: number;
  inside: number;
}

function createTally(): Tally {
  return { counts: new Float64Array(400), total: 0, squares: 0, inside: 0 };
}

function addTo(tally: Tally, value: number): void {
  tally.total++;
  // Far out are hot pixels, whose squares would drown the noise's.
  if (Math.abs(value) < 12) {
    tally.squares += value * value;
    tally.inside++;
  }
  if (value > 0) tally.counts[Math.min(399, Math.floor(value * 10))]!++;
}

function deviationOf({ squares, inside }: Tally): number {
  return Math.sqrt(squares / Math.max(1, inside));
}

/** Height of a tally over which this share of all lies. */
function heightAt({ counts, total }: Tally, share: number): number {
  const wanted = share * total;
  let above = 0;
  for (let bin = counts.length - 1; bin >= 0; bin--) {
    const n = counts[bin]!;
    if (above + n >= wanted) return (bin + 1 - (wanted - above) / n) / 10;
    above += n;
  }
  return 0;
}

/**
 * Reach of the tail out where one pixel in 10⁹ lies, over that of a normal distribution with the same deviation: −log of the share
 * above grows as a power of the height (2 for a normal one, 1 for one that falls exponentially), told from the heights that 1 % and
 * 0.1 % exceed, and from those of a normal distribution by the same rule. Never below 1; up to 1.15 is granularity of the codes.
 */
function tailOf(tally: Tally): number {
  const deviation = deviationOf(tally);
  const [low, high] = [heightAt(tally, 0.01), heightAt(tally, 0.001)];
  if (!(low > 0 && high > low * 1.02 && deviation > 0)) return 1;
  const far = Math.log(1e9);
  const carry = (a: number, b: number) => {
    const power = Math.log(Math.log(1000) / Math.log(100)) / Math.log(b / a);
    return b * (far / Math.log(1000)) ** (1 / power);
  };
  const ratio = carry(low / deviation, high / deviation) / carry(2.3263, 3.0902);
  return ratio < 1.15 ? 1 : ratio;
}
