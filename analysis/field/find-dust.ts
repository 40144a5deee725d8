import type { Frame } from '../image.ts';
import { doubleBoxBlur } from '../numeric/box-blur.ts';
import { normalCdf } from '../numeric/normal.ts';
import { blurGaussian, halve, type Layer, levelOut, reduceCodes } from './layers.ts';
import { fitShadow, type Shadow } from './shadow-profile.ts';
import { centreOf, ringsAbout, type SpotPlace } from './spot-window.ts';

export interface DustSpot extends Shadow {
  /** Image pixels. */
  readonly x: number;
  readonly y: number;
  /** Response of the filter that fits it best, in standard deviations of that filter's own noise. */
  readonly strength: number;
}

/** Strength from which a spot counts: noise alone reaches it once in fifty frames. Our choice. */
const leastStrength = 6;
/** Share of light that must be missing: below it lie JPEG's steps and the diffuser's own unevenness. Our choice. */
const leastDepth = 0.004;
/** Rounding leaves contours on a smooth fall of light, whose dips reach this share of a step after filtering. Found by rendering. */
const contour = 0.65;
/**
 * JPEG drops a block's coefficients below half a step, so little noise leaves lone patterns here and there, which the scatter of their
 * neighbours doesn't show. Dips reach this many steps of a block's mean where a few coincide: 2.7 at most over qualities 75…92, found
 * by rendering.
 */
const lonePattern = 3;
/** Noise, in steps of a block's mean, above which most coefficients are kept and so scatter like noise: half a coefficient's own step. */
const kept = 4;
/** A centre of this deviation spans a block of 8 pixels; over a wider one a lone block's pattern thins out. */
const blockWidth = 2;
/** Noise of a pixel, in codes, above which its rounding to whole codes is lost in it. */
const dithered = 0.5;
/** Filters at each layer, in pixels of the layer: deviation of the Gaussian centre, box of the surround, about three times as wide. */
const filters = [
  { width: 1, box: 7 },
  { width: 1.5, box: 11 },
];
/** A frame with more is not a test of dust; the rest is counted and not measured. */
const mostMeasured = 300;

/**
 * Dark blurred spots on a flat frame: dust on the sensor's filter, strongest first. Centre-surround filters of widths from one pixel of
 * the frame made small to a thirtieth of the frame, each against its own local noise, so that slow shading and noise that changes over
 * the frame invent nothing. Common practice, no standard.
 * @param codeToLight code 0…1 of full scale → relative light, for the depth
 */
export function findDust(frame: Frame, codeToLight: (code: number) => number): DustSpot[] {
  const least = leastResponses(frame);
  let layer: Layer | null = levelOut(reduceCodes(frame));
  const peaks: Peak[] = [];
  while (layer && Math.min(layer.width, layer.height) >= 24) {
    for (const filter of filters)
      peaks.push(...filterLayer(layer, filter, least(filter.width * layer.factor)));
    layer = halve(layer);
  }
  const spots: DustSpot[] = [];
  for (const peak of keepStrongest(peaks)) {
    if (spots.length >= mostMeasured) break;
    const centred = centreOf(frame, peak);
    const shadow = fitShadow(ringsAbout(frame, centred, codeToLight));
    if (!shadow || shadow.depth < leastDepth) continue;
    const { x, y, strength } = centred;
    // A wide shadow may have several peaks of noise in it, farther apart than its own filter's reach.
    if (spots.some((other) => Math.hypot(other.x - x, other.y - y) < 0.7 * other.diameter))
      continue;
    spots.push({ ...allowForEdge(frame, centred, shadow), x, y, strength });
  }
  return spots;
}

/** A shadow that the frame's edge cuts has its middle and width told from what is left of it. */
function allowForEdge(frame: Frame, { x, y }: Peak, shadow: Shadow): Shadow {
  const clear = Math.min(x, y, frame.width - x, frame.height - y) > 0.7 * shadow.diameter;
  if (clear) return shadow;
  return {
    ...shadow,
    diameterUncertainty: Math.hypot(shadow.diameterUncertainty, 0.4 * shadow.diameter),
    depthUncertainty: Math.hypot(shadow.depthUncertainty, 0.25 * shadow.depth),
  };
}

/**
 * Response, codes 0…1, that rounding alone may give a filter whose centre has a deviation of so many image pixels: rounding to whole
 * codes where no noise covers it, and JPEG's of its blocks.
 */
function leastResponses(frame: Frame): (width: number) => number {
  const { data, width, maxCode, blockStep } = frame;
  const scale = maxCode / 255;
  let squares = 0;
  let count = 0;
  // Neighbours in a row at places spread over the frame; the sixth pixel of a block has its neighbour in the same block.
  for (let at = 5 * width * 3 + 1; at + 3 < data.length; at += 3 * 8 * 97) {
    const difference = Math.abs(data[at]! - data[at + 3]!);
    if (difference > 20 * scale) continue;
    squares += difference * difference;
    count++;
  }
  const noise = Math.sqrt(squares / Math.max(1, count) / 2);
  const blocks = blockStep?.luma ?? 0;
  const contours = contour * Math.hypot(blocks, noise < dithered ? scale : 0);
  const patterns = noise < kept * blocks ? lonePattern * blocks : 0;
  return (width) => Math.max(contours, patterns * Math.min(1, blockWidth / width)) / maxCode;
}

/** Each spot counts by the chance that its noise left it above the threshold. */
export function dustCountUncertainty(spots: readonly DustSpot[]): number {
  const variance = spots.reduce((sum, { strength }) => {
    const p = normalCdf(strength - leastStrength);
    return sum + p * (1 - p);
  }, 0);
  return Math.sqrt(variance);
}

interface Peak extends SpotPlace {
  readonly strength: number;
}

/** Local maxima of surround minus centre that stand out of the response's own scatter thereabouts. */
function filterLayer(
  layer: Layer,
  { width, box }: (typeof filters)[number],
  least: number,
): Peak[] {
  const { data, factor } = layer;
  const centre = blurGaussian(layer, data, width);
  const buffer = new Float32Array(data.length);
  const response = doubleBoxBlur(data, layer.width, layer.height, box, buffer);
  for (let i = 0; i < response.length; i++) response[i]! -= centre[i]!;
  const noise = localScatter(layer, response);
  const peaks: Peak[] = [];
  const border = Math.ceil(2 * width);
  for (let row = 0; row < layer.height; row++)
    for (let col = 0; col < layer.width; col++) {
      const value = response[row * layer.width + col]!;
      if (value < least) continue;
      const sigma = noise.at(col, row);
      if (value < leastStrength * sigma || !isPeak(layer, response, col, row, value)) continue;
      const edge =
        Math.min(col, row, layer.width - 1 - col, layer.height - 1 - row) < border ? edgeNoise : 1;
      const strength = value / sigma / edge;
      if (strength < leastStrength) continue;
      peaks.push({
        x: (col + 0.5) * factor,
        y: (row + 0.5) * factor,
        sigma: width * factor,
        strength,
      });
    }
  return peaks;
}

/** Beyond the frame's edge the filters see the edge's pixels again, whose noise then counts twice. */
const edgeNoise = 1.4;

function isPeak(
  { width, height }: Layer,
  response: Float32Array,
  col: number,
  row: number,
  value: number,
): boolean {
  for (let y = Math.max(0, row - 1); y <= Math.min(height - 1, row + 1); y++)
    for (let x = Math.max(0, col - 1); x <= Math.min(width - 1, col + 1); x++)
      if (response[y * width + x]! > value) return false;
  return true;
}

/** Standard deviation of a response by region of the frame, from the median of its size, so that spots hardly count. */
function localScatter(
  { width, height }: Layer,
  response: Float32Array,
): { at(col: number, row: number): number } {
  const columns = Math.max(1, Math.min(8, Math.floor(width / 24)));
  const rows = Math.max(1, Math.min(6, Math.floor(height / 24)));
  const scatter = new Float64Array(columns * rows);
  for (let region = 0; region < scatter.length; region++) {
    const left = Math.floor(((region % columns) * width) / columns);
    const right = Math.floor((((region % columns) + 1) * width) / columns);
    const top = Math.floor((Math.floor(region / columns) * height) / rows);
    const bottom = Math.floor(((Math.floor(region / columns) + 1) * height) / rows);
    const step = Math.max(1, Math.floor(Math.sqrt(((right - left) * (bottom - top)) / 3000)));
    const sizes: number[] = [];
    for (let y = top; y < bottom; y += step)
      for (let x = left; x < right; x += step) sizes.push(Math.abs(response[y * width + x]!));
    const sorted = Float64Array.from(sizes).sort();
    scatter[region] = Math.max(sorted[sorted.length >> 1]! * 1.4826, 1e-7);
  }
  return {
    at: (col, row) =>
      scatter[
        Math.min(rows - 1, Math.floor((row * rows) / height)) * columns +
          Math.min(columns - 1, Math.floor((col * columns) / width))
      ]!,
  };
}

/** Strongest first; a weaker one within a stronger one's reach, at whatever width, is the same spot. */
function keepStrongest(peaks: readonly Peak[]): Peak[] {
  const kept: Peak[] = [];
  for (const peak of peaks.toSorted((a, b) => b.strength - a.strength)) {
    const reach = (other: Peak) => 2.4 * Math.max(other.sigma, 0.6 * peak.sigma);
    if (kept.every((other) => Math.hypot(other.x - peak.x, other.y - peak.y) > reach(other)))
      kept.push(peak);
    if (kept.length > 4 * mostMeasured) break;
  }
  return kept;
}
