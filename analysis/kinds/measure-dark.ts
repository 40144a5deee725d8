import { MeasurementError } from '../errors.ts';
import type { Frame } from '../image.ts';
import { fitCensoredNormal, type NormalFit } from '../noise/censored-normal.ts';
import { gatherDark } from '../noise/dark-statistics.ts';
import { countUncertainty, findHotPixels, type HotPixel } from '../noise/find-hot-pixels.ts';
import type { Metric, Plots, Warning } from '../result.ts';

/** A frame brighter than this, codes of 255, wasn't taken with the cap on. Our choice: warm sensors reach some 20. */
const tooBright = 64;
/** Share of codes at 0 from which level and noise are carried on from the part that is seen. */
const someBlack = 0.02;
/** Hot pixels a drawing can show. */
const drawn = 500;

/**
 * A frame taken with the lens cap on.
 * - dark.hot, 1: pixels that stand out of their neighbourhood; 6 σ and more are all found
 * - dark.level, DN: mean code of the three channels, of what the frame would hold were it not cut off at 0
 * - dark.noise, DN: standard deviation of a channel's codes, root mean square of the three; hot pixels, banding and rounding left out
 * - dark.banding, DN: standard deviation of row and column means together, beyond what the noise explains
 * DN are codes of 255, whatever the file's depth. Common practice, no standard; EMVA 1288 comes nearest.
 * @throws MeasurementError not-dark when the mean is above 64
 */
export function measureDark(frame: Frame): {
  metrics: Metric[];
  warnings: Warning[];
  plots: Pick<Plots, 'spots'>;
} {
  const statistics = gatherDark(frame);
  const scale = 255 / frame.maxCode;
  const mean = statistics.mean.reduce((s, v) => s + v, 0) / statistics.mean.length;
  if ((mean / 3) * scale > tooBright) {
    throw new MeasurementError(
      'not-dark',
      `The picture’s mean code is ${Math.round((mean / 3) * scale)} of 255, so light fell in. Put the cap on, cover the viewfinder, and photograph again.`,
    );
  }
  const hot = findHotPixels(frame, { statistics });
  const bandingVariance = (statistics.rowVariance + statistics.columnVariance) / 9;
  const { level, noise, black, count } = noiseOf(frame, hot, bandingVariance);
  const banding = Math.sqrt(bandingVariance);
  const bandingDoubt = statistics.bandingUncertainty / 9;
  // √v is known to u(v) / 2√v while v is large, and to √u(v) where it is lost in its own doubt.
  const bandingUncertainty = bandingDoubt / Math.max(2 * banding, Math.sqrt(bandingDoubt) || 1);
  const metric = (name: string, unit: string, value: number, uncertainty: number): Metric => ({
    name,
    value,
    unit,
    uncertainty,
  });
  const metrics = [
    metric('dark.hot', '1', hot.length, countUncertainty(hot)),
    metric(
      'dark.level',
      'DN',
      level * scale,
      scale * Math.hypot(noise / Math.sqrt(count), doubtOf(black)),
    ),
    metric(
      'dark.noise',
      'DN',
      noise * scale,
      scale * Math.hypot(noise / Math.sqrt(2 * count), doubtOf(black), 0.02 * noise),
    ),
    metric('dark.banding', 'DN', banding * scale, bandingUncertainty * scale),
  ];
  const spots = hot.slice(0, drawn).map(({ x, y, height }) => ({
    x: x + 0.5,
    y: y + 0.5,
    diameter: 1,
    contrast: (100 * height) / frame.maxCode,
  }));
  return { metrics, warnings: warn(frame, hot, black), plots: { spots } };
}

/** What the missing part of the distribution may hide, codes. Our choice. */
function doubtOf(black: number): number {
  return black > someBlack ? 0.05 + 0.3 * black ** 2 : 0.01;
}

interface DarkNoise {
  readonly level: number;
  readonly noise: number;
  /** Share of codes at 0. */
  readonly black: number;
  /** Codes that were read. */
  readonly count: number;
}

function noiseOf(frame: Frame, hot: readonly HotPixel[], banding: number): DarkNoise {
  const counts = histogramsWithout(frame, hot);
  const fits: NormalFit[] = counts.map(fitCensoredNormal);
  const total = counts.reduce((sum, c) => sum + c.reduce((s, n) => s + n, 0), 0);
  const zeros = counts.reduce((sum, c) => sum + c[0]!, 0);
  const variance = fits.reduce((sum, { deviation }) => sum + deviation ** 2, 0) / 3;
  return {
    level: fits.reduce((sum, fit) => sum + fit.mean, 0) / 3,
    noise: Math.sqrt(Math.max(0, variance - banding)),
    black: zeros / Math.max(1, total),
    count: Math.max(1, total),
  };
}

/** Rows enough for a histogram of a million pixels, without hot pixels and what is smeared about them. */
function histogramsWithout(frame: Frame, hot: readonly HotPixel[]): Float64Array[] {
  const { data, width, height, maxCode } = frame;
  const counts = [0, 1, 2].map(() => new Float64Array(maxCode + 1));
  const [red, green, blue] = counts as [Float64Array, Float64Array, Float64Array];
  const step = Math.max(1, Math.floor((width * height) / 1e6));
  const margin = frame.blockStep ? 8 : 2;
  const byRow = new Map<number, number[]>();
  for (const { x, y } of hot)
    for (let row = y - margin; row <= y + margin; row++)
      byRow.set(row, [...(byRow.get(row) ?? []), x]);
  for (let y = 0; y < height; y += step) {
    const skip = byRow.get(y) ?? [];
    for (let x = 0; x < width; x++) {
      if (skip.length > 0 && skip.some((at) => Math.abs(at - x) <= margin)) continue;
      const at = (y * width + x) * 3;
      red[data[at]!]!++;
      green[data[at + 1]!]!++;
      blue[data[at + 2]!]!++;
    }
  }
  return counts;
}

function warn(frame: Frame, hot: readonly HotPixel[], black: number): Warning[] {
  const warnings: Warning[] = [];
  if (black > someBlack) {
    warnings.push({
      code: 'black-clipped',
      message: `${Math.round(100 * black)} % of the codes are 0: the camera cuts off black there, so level and noise are worked out from what lies above and hot pixels that are weak can’t be seen. Photograph again at a longer time or a higher ISO if they matter.`,
    });
  }
  if (frame.blockStep && hot.length > 0) {
    warnings.push({
      code: 'hot-pixels-smeared',
      message:
        'JPEG smears hot pixels over their block, so the count is a lower bound. Two frames tell defects from chance: only what shows in both counts.',
    });
  }
  return warnings;
}
