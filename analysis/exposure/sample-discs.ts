import type { DiscSample } from '../colour/disc-sample.ts';
import { luminanceWeights } from '../colour/frame-colour.ts';
import type { Frame } from '../image.ts';
import type { Registration } from '../target/registration.ts';
import type { Disc } from '../target/target.ts';

/** Share of a disc's radius that is read: clear of the blurred rim (target README). */
const innerShare = 0.6;
/** Pixels beyond this many say nothing more; then only every second or third row is read. */
const enoughPixels = 5000;
const fewestPixels = 12;
/** Cut off at each end before the mean, against dust and glints. */
const trimmedShare = 0.02;
/** Neighbouring pixels share noise after demosaicing and compression; this many count as one. Common practice, no source. */
const pixelsPerIndependent = 4;
/**
 * Reads every disc of the target that lies wholly in the frame.
 * @returns in the target's order, `light` 1 until the shading is known; discs outside the frame or under 12 pixels are left out
 */
export function sampleDiscs(frame: Frame, registration: PlacedDiscs): DiscSample[] {
  const reader = createReader(frame);
  const samples: DiscSample[] = [];
  for (const disc of registration.target.discs) {
    const sample = reader(disc, placeDisc(registration, disc));
    if (sample) samples.push(sample);
  }
  return samples;
}

/** Discs and where they lie: the target's registration, or a card's. */
export interface PlacedDiscs extends Pick<Registration, 'toImage' | 'jacobian'> {
  readonly target: { readonly discs: readonly Disc[] };
}

interface PlacedDisc {
  x: number;
  y: number;
  radius: number;
  /** Image offset → target offset, row-major 2 × 2, scaled so that the read part is the unit disc. */
  inverse: [number, number, number, number];
  halfWidth: number;
  halfHeight: number;
}

function placeDisc(registration: PlacedDiscs, disc: Disc): PlacedDisc {
  const { x, y } = registration.toImage(disc.x, disc.y);
  const [a, b, c, d] = registration.jacobian(disc.x, disc.y);
  const determinant = a * d - b * c;
  const read = innerShare * disc.radius;
  const scale = 1 / (determinant * read);
  return {
    x,
    y,
    radius: disc.radius * Math.sqrt(Math.abs(determinant)),
    inverse: [d * scale, -b * scale, -c * scale, a * scale],
    halfWidth: read * Math.hypot(a, b),
    halfHeight: read * Math.hypot(c, d),
  };
}

function createReader(frame: Frame) {
  const histograms = [0, 1, 2].map(() => new Uint32Array(frame.maxCode + 1));
  const weights = luminanceWeights(frame);

  return (disc: Disc, place: PlacedDisc): DiscSample | null => {
    const { x, y, halfWidth, halfHeight } = place;
    const inside =
      x - halfWidth >= 0 &&
      y - halfHeight >= 0 &&
      x + halfWidth <= frame.width &&
      y + halfHeight <= frame.height;
    if (!inside) return null;
    const read = readPixels(frame, place, histograms, weights);
    const rounding = compressionRounding(frame, read.dither);
    const channels = histograms.map((histogram, i) =>
      summarise(histogram, read, frame, frame.toLinear[i]!, rounding[i]!),
    );
    for (const histogram of histograms) histogram.fill(0);
    if (read.pixels < fewestPixels) return null;
    const [red, green, blue] = channels as [Channel, Channel, Channel];
    const luminance = weights[0] * red.mean + weights[1] * green.mean + weights[2] * blue.mean;
    const fromRounding = Math.hypot(
      weights[0] * red.rounding,
      weights[1] * green.rounding,
      weights[2] * blue.rounding,
    );
    return {
      disc,
      pixels: read.pixels,
      x,
      y,
      radius: place.radius,
      light: 1,
      linear: [red.mean, green.mean, blue.mean],
      uncertainty: [red.uncertainty, green.uncertainty, blue.uncertainty],
      luminance,
      luminanceUncertainty: Math.hypot(
        Math.sqrt((read.luminanceVariance * pixelsPerIndependent) / read.pixels),
        fromRounding,
      ),
      clipped: red.clipped || green.clipped || blue.clipped,
    };
  };
}

interface DiscPixels {
  pixels: number;
  luminanceVariance: number;
  /** Standard deviation from one pixel to its neighbour, in green codes: the noise that survives compression inside its blocks. */
  dither: number;
}

function readPixels(
  frame: Frame,
  place: PlacedDisc,
  histograms: readonly Uint32Array[],
  weights: readonly [number, number, number],
): DiscPixels {
  const { data, width, toLinear } = frame;
  const { x, y, inverse, halfWidth, halfHeight } = place;
  const [red, green, blue] = histograms as [Uint32Array, Uint32Array, Uint32Array];
  const [redLinear, greenLinear, blueLinear] = toLinear;
  const step = Math.max(1, Math.ceil((Math.PI * halfWidth * halfHeight) / enoughPixels));
  const top = Math.max(0, Math.floor(y - halfHeight));
  const bottom = Math.min(frame.height, Math.ceil(y + halfHeight));
  const left = Math.max(0, Math.floor(x - halfWidth));
  const right = Math.min(width, Math.ceil(x + halfWidth));
  let pixels = 0;
  let mean = 0;
  let squares = 0;
  let steps = 0;
  let stepSquares = 0;
  for (let row = top; row < bottom; row += step) {
    const dy = row + 0.5 - y;
    let before = -1;
    for (let col = left; col < right; col++) {
      const dx = col + 0.5 - x;
      const u = inverse[0] * dx + inverse[1] * dy;
      const v = inverse[2] * dx + inverse[3] * dy;
      if (u * u + v * v > 1) continue;
      const i = (row * width + col) * 3;
      const r = data[i]!;
      const g = data[i + 1]!;
      const b = data[i + 2]!;
      red[r]!++;
      green[g]!++;
      blue[b]!++;
      const light =
        weights[0] * redLinear[r]! + weights[1] * greenLinear[g]! + weights[2] * blueLinear[b]!;
      pixels++;
      const difference = light - mean;
      mean += difference / pixels;
      squares += difference * (light - mean);
      if (before >= 0) {
        steps++;
        stepSquares += (g - before) ** 2;
      }
      before = g;
    }
  }
  return {
    pixels,
    luminanceVariance: pixels > 1 ? squares / (pixels - 1) : 0,
    dither: steps > 0 ? Math.sqrt(stepSquares / steps / 2) : 0,
  };
}

interface Channel {
  mean: number;
  uncertainty: number;
  /** The part of `uncertainty` that comes from rounding and compression. */
  rounding: number;
  clipped: boolean;
}

function summarise(
  histogram: Uint32Array,
  { pixels, dither }: DiscPixels,
  frame: Frame,
  toLinear: Float32Array,
  compression: number,
): Channel {
  const cut = Math.floor(pixels * trimmedShare);
  let before = 0;
  let kept = 0;
  let sum = 0;
  let codeSum = 0;
  let codeSquares = 0;
  for (let code = 0; code < histogram.length && before < pixels; code++) {
    const count = histogram[code]!;
    if (count === 0) continue;
    codeSum += count * code;
    codeSquares += count * code * code;
    const inside = Math.min(before + count, pixels - cut) - Math.max(before, cut);
    if (inside > 0) {
      kept += inside;
      sum += inside * toLinear[code]!;
    }
    before += count;
  }
  const codeMean = codeSum / pixels;
  const codeSigma = Math.sqrt(Math.max(0, codeSquares / pixels - codeMean ** 2));
  const slope = slopeAt(toLinear, codeMean);
  const rounding = slope * Math.hypot(roundingLeft(1, dither), compression);
  const noise = (slope * codeSigma * Math.sqrt(pixelsPerIndependent)) / Math.sqrt(pixels);
  return {
    mean: sum / kept,
    uncertainty: Math.hypot(noise, rounding),
    rounding,
    clipped: isClipped(histogram, pixels, frame.maxCode),
  };
}

/**
 * Standard uncertainty that rounding to steps leaves in a mean: step/√12 for a flat patch, dithered away by noise of σ
 * as exp(−2π²σ²/step²) (Widrow & Kollár, Quantization Noise, 2008; formula from memory).
 */
function roundingLeft(step: number, sigma: number): number {
  return (step * Math.exp(-2 * (Math.PI * (sigma / step)) ** 2)) / Math.sqrt(12);
}

/**
 * What JPEG's rounding leaves in red, green and blue of a flat patch, in codes (YCbCr of ITU-T T.871): colours are rounded on the
 * way in and out, luma and chroma to whole numbers, block means to the tables' steps. All pixels of a flat patch are rounded
 * alike, so averaging doesn't help; only noise that survives does, and less of it survives in chroma.
 */
function compressionRounding(frame: Frame, dither: number): [number, number, number] {
  if (!frame.blockStep) return [0, 0, 0];
  const { luma, chroma } = frame.blockStep;
  const chromaDither = dither / (frame.chromaHalved ? 12 : 5);
  const rgb = roundingLeft(1, dither);
  const y = Math.hypot(roundingLeft(1, dither), roundingLeft(luma, dither / 8));
  const c = Math.hypot(roundingLeft(1, chromaDither), roundingLeft(chroma, chromaDither));
  return [
    Math.hypot(rgb, y, 1.402 * c),
    Math.hypot(rgb, y, 0.344 * c, 0.714 * c),
    Math.hypot(rgb, y, 1.772 * c),
  ];
}

function slopeAt(toLinear: Float32Array, code: number): number {
  const below = Math.max(0, Math.min(toLinear.length - 2, Math.floor(code)));
  return toLinear[below + 1]! - toLinear[below]!;
}

/**
 * More than one pixel in twenty at an end (254 and over, 1 and under of 255). Noise figures need a mean three deviations from
 * the end; a mean doesn't: at one in twenty it is off by a fiftieth of the noise.
 */
function isClipped(histogram: Uint32Array, pixels: number, maxCode: number): boolean {
  const low = Math.round(maxCode / 255);
  let atEnds = 0;
  for (let code = 0; code <= low; code++) atEnds += histogram[code]! + histogram[maxCode - code]!;
  return atEnds > pixels / 20;
}
