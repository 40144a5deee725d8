import type { DiscSample } from '../colour/disc-sample.ts';
import { toLinearSrgb } from '../colour/frame-colour.ts';
import { midGrey, midToneCode, toCode, toLinear } from '../colour/srgb.ts';
import type { Frame } from '../image.ts';
import type { Plots } from '../result.ts';
import { type FitPoint, type LocalFit, localFit } from './local-fit.ts';
import { monotoneCurve } from './monotone-curve.ts';
import type { Plateau } from './sample-plateaus.ts';
import { smoothingSpline } from './smoothing-spline.ts';

/**
 * The camera's tone response (opto-electronic conversion function, ISO 14524:2009), read from the twelve greys:
 * which reflectance, in the light of the frame's centre, gives which code. Extrapolated straight in log–log beyond the greys.
 */
export interface ToneResponse {
  /** Code of each channel → relative light, in units of reflectance; tables as long as the frame's. */
  readonly toLight: readonly [Float32Array, Float32Array, Float32Array];
  /** Green code 0…1 of full scale → relative light: for what is measured on green alone. */
  codeToLight(code: number): number;
  /** Luminance in the file's linear light → relative light. */
  luminanceToLight(luminance: number): number;
  /** Luminance in the file's linear light → relative light in stops, with its standard uncertainty. Null too far beyond the greys. */
  lightStops(luminance: number): LocalFit | null;
  /** Luminance of the darkest and of the lightest grey in use: between them nothing is extrapolated. */
  readonly range: readonly [number, number];
  /** Slope of log2 file luminance on log2 light within ±1.5 stops of mid grey, 1 is faithful, and its standard uncertainty. */
  readonly contrast: number;
  readonly contrastUncertainty: number;
  /** Linear sRGB that an 18 % grey comes out at, and standard uncertainties in stops. */
  readonly midGrey: readonly [number, number, number];
  readonly midGreyStops: readonly [number, number, number];
}

/** Stops to each side that a local fit looks at. */
const reach = 1.3;
const fewestGreys = 4;
/** How far beyond the last grey, in stops, light is still told. */
const farthestBeyond = 1;
/** Uncertainty that stays however many pixels: the greys' own shading, stops. Found by rendering. */
const floorStops = 0.001;
/** Part of a JPEG's rounding in red and blue that neighbouring greys share. Found by rendering. */
const sharedRounding = 0.4;

/** A plateau and the light at its station against the frame's centre. */
export interface LitPlateau extends Plateau {
  readonly light: number;
}

/** What a station's light, a print's evenness and a JPEG's rounding leave in a plateau, stops. Found by rendering. */
const plateauStops = 0.006;

/**
 * @param samples    all discs; the greys among them that are unclipped are used
 * @param plateaus   pads and squares: they pin the channels' tables where the edges are
 * @returns null with fewer than four usable greys
 */
export function measureTone(
  frame: Frame,
  samples: readonly DiscSample[],
  plateaus: readonly LitPlateau[] = [],
): ToneResponse | null {
  const greys = usableGreys(samples);
  if (greys.length < fewestGreys) return null;
  const luminances = toPoints(greys, (s) => [s.luminance, s.luminanceUncertainty]);
  const mid = [0, 1, 2].map((channel) => midGreyOf(frame, greys, channel));
  const curve = responseCurve(luminances);
  const channels = [0, 1, 2].map((channel) =>
    responseCurve([
      ...toPoints(greys, (s) => [s.linear[channel]!, s.uncertainty[channel]!]),
      ...plateauPoints(plateaus, channel),
    ]),
  );
  const slope = contrastOf(greys);
  if (!curve || !slope || mid.some((m) => !m) || channels.some((c) => !c)) return null;
  const tables = channels.map((c, i) => frame.toLinear[i]!.map((linear) => c!(linear)));
  const sorted = greys.map((s) => s.luminance).sort((a, b) => a - b);
  const range = [sorted[0]!, sorted.at(-1)!] as const;
  return {
    toLight: tables as unknown as ToneResponse['toLight'],
    codeToLight: (code) => tables[1]![Math.round(code * frame.maxCode)] ?? Number.NaN,
    luminanceToLight: curve,
    lightStops: (luminance) => stopsAt(luminances, range, luminance),
    range,
    contrast: slope.value,
    contrastUncertainty: slope.uncertainty,
    midGrey: mid.map((m) => 2 ** m!.value) as unknown as ToneResponse['midGrey'],
    midGreyStops: mid.map((m) => m!.uncertainty) as unknown as ToneResponse['midGreyStops'],
  };
}

/** The greys with their codes of full scale, for the tone curve's drawing. */
export function plotTone(samples: readonly DiscSample[]): NonNullable<Plots['tone']> {
  return samples.filter(isGrey).map(({ disc, luminance, clipped }) => ({
    id: disc.id,
    reflectance: disc.reflectance ?? 0,
    code: toCode(Math.max(0, luminance)),
    used: !clipped,
  }));
}

export function isGrey({ disc }: DiscSample): boolean {
  return disc.kind === 'grey' && disc.reflectance !== undefined;
}

/** Luminance of code 118 in linear light. */
export const midToneLuminance = toLinear(midToneCode);

function usableGreys(samples: readonly DiscSample[]): DiscSample[] {
  return samples.filter((s) => isGrey(s) && !s.clipped && s.linear.every((value) => value > 0));
}

function light(sample: DiscSample): number {
  return (sample.disc.reflectance ?? 0) * sample.light;
}

/** log2 of what came out against log2 of the light that went in. */
function toPoints(
  greys: readonly DiscSample[],
  pick: (sample: DiscSample) => readonly [number, number],
): FitPoint[] {
  return greys.map((sample) => {
    const [value, uncertainty] = pick(sample);
    return {
      x: Math.log2(value),
      y: Math.log2(light(sample)),
      sigma: Math.hypot(uncertainty / value / Math.LN2, floorStops),
    };
  });
}

function plateauPoints(plateaus: readonly LitPlateau[], channel: number): FitPoint[] {
  return plateaus.map(({ reflectance, light, linear, uncertainty }) => ({
    x: Math.log2(linear[channel]!),
    y: Math.log2(reflectance * light),
    sigma: Math.hypot(uncertainty[channel]! / linear[channel]! / Math.LN2, plateauStops),
  }));
}

/** Knots of the table that a spline is turned into: close enough that straight pieces would do. */
const knots = 64;

/** Linear light of the file → relative light: no smoother than the points ask for, monotone, straight in log–log beyond them. */
export function responseCurve(points: readonly FitPoint[]): ((linear: number) => number) | null {
  const spline = smoothingSpline(points);
  if (!spline) return null;
  const all = points.map((p) => p.x);
  const low = Math.min(...all);
  const high = Math.max(...all);
  const x: number[] = [];
  const y: number[] = [];
  for (let i = 0; i <= knots; i++) {
    const at = low + ((high - low) * i) / knots;
    const value = spline(at);
    if (x.length > 0 && value <= y.at(-1)! + 1e-5) continue;
    x.push(at);
    y.push(value);
  }
  if (x.length < fewestGreys) return null;
  const slope = (from: number, to: number) => (y[to]! - y[from]!) / (x[to]! - x[from]!);
  const curve = monotoneCurve(x, y, slope(0, 2), slope(x.length - 3, x.length - 1));
  return (linear) => (linear > 0 ? 2 ** curve(Math.log2(linear)) : 0);
}

export function stopsAt(
  points: readonly FitPoint[],
  range: readonly [number, number],
  luminance: number,
): LocalFit | null {
  if (!(luminance > 0)) return null;
  const at = Math.log2(luminance);
  const beyond = Math.max(0, Math.log2(range[0]) - at, at - Math.log2(range[1]));
  if (beyond > farthestBeyond) return null;
  const fit = localFit(points, at, reach);
  // A parabola goes astray as the square of the distance; 0.1 per stop² is common practice, no source.
  return fit && { ...fit, uncertainty: Math.hypot(fit.uncertainty, 0.1 * beyond ** 2) };
}

/** log2 of the linear sRGB channel that 18 % in even light comes out at. */
function midGreyOf(frame: Frame, greys: readonly DiscSample[], channel: number): LocalFit | null {
  const points = greys.map((sample) => {
    const value = toLinearSrgb(frame, sample.linear)[channel]!;
    const relative = sample.uncertainty[channel]! / sample.linear[channel]!;
    return {
      x: Math.log2(light(sample)),
      y: Math.log2(value),
      sigma: Math.hypot(relative / Math.LN2, floorStops),
    };
  });
  if (points.some((p) => !Number.isFinite(p.y))) return null;
  const at = Math.log2(midGrey);
  const inReach = points.some((p) => p.x <= at + 0.5) && points.some((p) => p.x >= at - 0.5);
  const fit = inReach ? localFit(points, at, reach) : null;
  if (!fit || !frame.blockStep) return fit;
  const mean = points.reduce((sum, p) => sum + p.sigma, 0) / points.length;
  return { ...fit, uncertainty: Math.hypot(fit.uncertainty, sharedRounding * mean) };
}

/** Regression over ±1.5 stops; each grey stands for the stretch of the scale that lies nearest to it. */
function contrastOf(greys: readonly DiscSample[]): { value: number; uncertainty: number } | null {
  const points = greys
    .map((s) => ({
      x: Math.log2(light(s) / midGrey),
      y: Math.log2(s.luminance),
      sigma: s.luminanceUncertainty / s.luminance / Math.LN2,
    }))
    .filter(({ x }) => Math.abs(x) <= 1.5)
    .sort((a, b) => a.x - b.x);
  if (points.length < fewestGreys) return null;
  const lengths = points.map(({ x }, i) => {
    const from = i === 0 ? -1.5 : (points[i - 1]!.x + x) / 2;
    const to = i === points.length - 1 ? 1.5 : (points[i + 1]!.x + x) / 2;
    return (to - from) / 3;
  });
  const mean = (pick: (p: (typeof points)[number]) => number) =>
    points.reduce((sum, p, i) => sum + lengths[i]! * pick(p), 0);
  const meanX = mean((p) => p.x);
  const meanY = mean((p) => p.y);
  const xx = mean((p) => (p.x - meanX) ** 2);
  const value = mean((p) => (p.x - meanX) * (p.y - meanY)) / xx;
  const scatter = mean((p) => (p.y - meanY - value * (p.x - meanX)) ** 2);
  const noise = mean((p) => p.sigma ** 2);
  const variance = Math.max(scatter, noise) / (points.length - 2) / xx;
  return { value, uncertainty: Math.sqrt(variance) };
}
