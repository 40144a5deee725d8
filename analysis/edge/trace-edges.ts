import type { Frame, Point } from '../image.ts';
import type { Edge } from '../result.ts';
import type { Registration } from '../target/registration.ts';
import {
  collectSamples,
  createSamples,
  type LightTables,
  type Samples,
} from './collect-samples.ts';
import { fitLine, type LineFit } from './fit-line.ts';
import { createLuma, type Luma } from './luma.ts';
import { type PlacedEdge, placeEdges } from './place-edges.ts';

export const binsPerPixel = 8;

/** An edge-spread function in bins of 1/8 px, normalised to 0 and 1 either side; bins without pixels are left out. */
export interface Profile {
  /** Mean distance of a bin's pixels from the edge, px. */
  readonly distance: Float64Array;
  readonly value: Float64Array;
  readonly pixels: Float64Array;
  /** Number of the bin, counted from `-reach`. */
  readonly bin: Int32Array;
  readonly reach: number;
  /** Dark level over the step, with the sign of the profile: the slope of uneven light is proportional to it. */
  readonly floor: number;
}

export interface ChannelTrace {
  readonly profile: Profile;
  /** Position along the normal toward growing x (or y), px, from an arbitrary zero shared by the channels of this edge. */
  readonly shift: number;
  /** Standard uncertainty of `shift` from the pixels' noise, px. */
  readonly shiftUncertainty: number;
  readonly sigma: number;
  /** Standard deviation of a pixel about the fitted step, over the step. */
  readonly residual: number;
  /** Light from the dark side to the light side. */
  readonly step: number;
}

export interface EdgeTrace {
  readonly station: string;
  readonly edge: Edge;
  readonly middle: Point;
  /** Unit normal toward growing x (vertical edges) or y. */
  readonly normal: Point;
  /** px. */
  readonly length: number;
  readonly red: ChannelTrace | null;
  readonly green: ChannelTrace;
  readonly blue: ChannelTrace | null;
  /** Where the file keeps colour at half the resolution. */
  readonly luma: ChannelTrace | null;
}

export interface Traces {
  readonly edges: readonly EdgeTrace[];
  /** Where the file keeps colour at half the resolution. */
  readonly luma: Luma | null;
  /** Edges that could not be read, with the reason. */
  readonly refused: readonly {
    station: string;
    edge: Edge;
    reason: 'clipped' | 'faint' | 'small';
  }[];
}

/** Largest share of clipped pixels about an edge: at 2 % the profile's plateau is already bent. Our choice. */
const mostClipped = 0.02;
/** JPEG spreads halved chroma over its blocks of 16 px; what it moved across an edge has to be collected again. px. */
const chromaReach = 20;
/** Fewest pixels about an edge. Our choice: below this the fit's own uncertainty passes 10 %. */
const fewestPixels = 80;

/**
 * Edge-spread functions of all squares, following ISO 12233's edge method: light is linearised, the edge is found along its whole
 * length (with the bend that lens distortion gives it), and every pixel is projected along it into sub-pixel bins.
 * Profiles are kept in the picture's directions, rising: a falling edge is turned upside down, so that the two parallel edges of a
 * square see the same line-spread function.
 * Where the file keeps colour at half the resolution the profiles reach further, see chromatic/.
 */
export function traceEdges(frame: Frame, registration: Registration, tables: LightTables): Traces {
  const least = frame.chromaHalved ? chromaReach : 0;
  const luma = frame.chromaHalved ? createLuma(frame, tables) : null;
  const lumaTable = luma?.table ?? null;
  const samples = createSamples();
  const edges: EdgeTrace[] = [];
  const refused: { station: string; edge: Edge; reason: 'clipped' | 'faint' | 'small' }[] = [];
  let blur = 1;
  for (const placed of placeEdges(registration)) {
    const traced = traceEdge(frame, tables, lumaTable, placed, blur, least, samples);
    if (typeof traced === 'string') {
      refused.push({ station: placed.station, edge: placed.edge, reason: traced });
      continue;
    }
    blur = traced.green.sigma;
    edges.push(traced);
  }
  return { edges, luma, refused };
}

/** One edge, or why it can't be read. `least` widens the profile's reach, px; `samples` is scratch space. */
export function traceEdge(
  frame: Frame,
  tables: LightTables,
  lumaTable: Float32Array | null,
  placed: PlacedEdge,
  expectedBlur: number,
  least: number,
  samples: Samples,
): EdgeTrace | 'clipped' | 'faint' | 'small' {
  let blur = expectedBlur;
  collectSamples(frame, tables, placed, blur, reachOf(blur, least), samples, lumaTable);
  if (samples.count < fewestPixels) return 'small';
  if (samples.clipped > mostClipped) return 'clipped';
  let green = fitLine(samples, 1);
  if (!green) return 'faint';
  if (Math.abs(green.sigma - blur) > 0.25 * blur) {
    blur = green.sigma;
    collectSamples(frame, tables, placed, blur, reachOf(blur, least), samples, lumaTable);
    if (samples.count < fewestPixels) return 'small';
    green = fitLine(samples, 1);
  }
  if (!green || green.step < 3 * green.residual) return 'faint';
  const scale = 1 / Math.hypot(1, placed.slope);
  const vertical = placed.edge === 'vertical';
  return {
    station: placed.station,
    edge: placed.edge,
    middle: placed.middle,
    normal: vertical
      ? { x: scale, y: -placed.slope * scale }
      : { x: -placed.slope * scale, y: scale },
    length: placed.length,
    red: traceChannel(samples, 0, green, least),
    green: describe(samples, 1, green, least),
    blue: traceChannel(samples, 2, green, least),
    luma: lumaTable && traceChannel(samples, 3, green, least),
  };
}

/** Far enough for the wide halo of a camera's sharpening; see fit-profile.ts. */
function reachOf(blur: number, least: number): number {
  return Math.min(24, Math.max(least, 5 * blur + 8));
}

function traceChannel(
  samples: Samples,
  channel: 0 | 2 | 3,
  green: LineFit,
  least: number,
): ChannelTrace | null {
  const fit = fitLine(samples, channel, green);
  if (!fit || fit.step < 3 * fit.residual) return null;
  return describe(samples, channel, fit, least);
}

function describe(
  samples: Samples,
  channel: 0 | 1 | 2 | 3,
  fit: LineFit,
  least: number,
): ChannelTrace {
  const { shift, shiftUncertainty, sigma, residual, step } = fit;
  const profile = binSamples(samples, channel, fit, least);
  return { profile, shift, shiftUncertainty, sigma, residual: residual / step, step };
}

function binSamples(
  samples: Samples,
  channel: 0 | 1 | 2 | 3,
  fit: LineFit,
  least: number,
): Profile {
  const { distance, along, count } = samples;
  const light = samples.light[channel];
  const { low, shift, tilt, bend } = fit;
  const gain = 1 / fit.step;
  const reach = reachOf(fit.sigma, least);
  const bins = Math.ceil(2 * reach * binsPerPixel);
  const distanceSum = new Float64Array(bins);
  const lightSum = new Float64Array(bins);
  const pixels = new Float64Array(bins);
  for (let i = 0; i < count; i++) {
    const t = along[i]!;
    const d = distance[i]! - shift - (tilt + bend * t) * t;
    const place = (d + reach) * binsPerPixel;
    if (!(place >= 0 && place < bins)) continue;
    const bin = place | 0;
    distanceSum[bin]! += d;
    lightSum[bin]! += light[i]!;
    pixels[bin]! += 1;
  }
  return packBins(distanceSum, lightSum, pixels, { low, gain, reach });
}

function packBins(
  distanceSum: Float64Array,
  lightSum: Float64Array,
  pixels: Float64Array,
  scale: { low: number; gain: number; reach: number },
): Profile {
  const { low, gain, reach } = scale;
  let filled = 0;
  for (let bin = 0; bin < pixels.length; bin++) if (pixels[bin]! > 0) filled++;
  const profile = {
    distance: new Float64Array(filled),
    value: new Float64Array(filled),
    pixels: new Float64Array(filled),
    bin: new Int32Array(filled),
    reach,
    floor: low * gain,
  };
  let next = 0;
  for (let bin = 0; bin < pixels.length; bin++) {
    const n = pixels[bin]!;
    if (n === 0) continue;
    profile.distance[next] = distanceSum[bin]! / n;
    profile.value[next] = (lightSum[bin]! / n - low) * gain;
    profile.pixels[next] = n;
    profile.bin[next] = bin;
    next++;
  }
  return profile;
}
