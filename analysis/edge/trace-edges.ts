import type { Frame, Point } from '../image.ts';
import type { Edge } from '../result.ts';
import type { Registration } from '../target/registration.ts';
import { type Bins, binSamples, profileOf } from './bin-samples.ts';
import {
  collectSamples,
  createSamples,
  type LightTables,
  type Samples,
} from './collect-samples.ts';
import { fitBins } from './fit-bins.ts';
import { fitLine, type LineFit } from './fit-line.ts';
import { createLuma, type Luma } from './luma.ts';
import { type PlacedEdge, placeEdges } from './place-edges.ts';

/** An edge-spread function in bins of 1/8 px, normalised to 0 and 1 either side; bins without pixels are left out. */
export interface Profile {
  /** Mean distance of a bin's pixels from the edge, px. */
  readonly distance: Float64Array;
  readonly value: Float64Array;
  readonly pixels: Float64Array;
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
  let green = fitLine(samples);
  if (!green) return 'faint';
  if (Math.abs(green.sigma - blur) > 0.25 * blur) {
    blur = green.sigma;
    collectSamples(frame, tables, placed, blur, reachOf(blur, least), samples, lumaTable);
    if (samples.count < fewestPixels) return 'small';
    green = fitLine(samples);
  }
  if (!green || green.step < 3 * green.residual) return 'faint';
  const scale = 1 / Math.hypot(1, placed.slope);
  const vertical = placed.edge === 'vertical';
  const bins = binSamples(samples, green, reachOf(green.sigma, least), lumaTable !== null);
  return {
    station: placed.station,
    edge: placed.edge,
    middle: placed.middle,
    normal: vertical
      ? { x: scale, y: -placed.slope * scale }
      : { x: -placed.slope * scale, y: scale },
    length: placed.length,
    red: traceChannel(bins, 0, green),
    green: describe(bins, 1, green, 0),
    blue: traceChannel(bins, 2, green),
    luma: lumaTable && traceChannel(bins, 3, green),
  };
}

/** Far enough for the wide halo of a camera's sharpening; see fit-profile.ts. */
function reachOf(blur: number, least: number): number {
  return Math.min(24, Math.max(least, 5 * blur + 8));
}

function traceChannel(bins: Bins, channel: 0 | 2 | 3, green: LineFit): ChannelTrace | null {
  const fit = fitBins(bins, channel, green);
  if (!fit || fit.step < 3 * fit.residual) return null;
  return describe(bins, channel, fit, fit.shift - green.shift);
}

/** @param offset  of the channel's edge from green's, px */
function describe(bins: Bins, channel: 0 | 1 | 2 | 3, fit: LineFit, offset: number): ChannelTrace {
  const { shift, shiftUncertainty, sigma, residual, step } = fit;
  const profile = profileOf(bins, channel, fit, offset);
  return { profile, shift, shiftUncertainty, sigma, residual: residual / step, step };
}
