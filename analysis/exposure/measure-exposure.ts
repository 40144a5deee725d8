import { midGrey, toLinear } from '../colour/srgb.ts';
import type { Capture } from '../image.ts';
import type { Metric, Warning } from '../result.ts';
import type { FrameLight } from './measure-frame.ts';
import { midToneLuminance, type ToneResponse } from './tone.ts';

export interface ExposureResult {
  readonly metrics: Metric[];
  readonly warnings: Warning[];
}

/**
 * Exposure of a photograph of the target.
 * - exposure.bias, EV: log2(0.18/ρ), ρ the reflectance that came out at code 118 (ISO 12232); negative is under-exposed.
 *   Error at most 0.02 EV while greys on both sides of code 118 are unclipped; left out when 118 lies over a stop beyond the greys.
 * - exposure.meterBias, EV: the bias less the compensation dialled in and less log2(0.18/ρ̄), what an averaging meter
 *   (ISO 2720) owes to the field's mean reflectance ρ̄. Automatic programs only.
 * - tone.contrast, 1: slope of log luminance on log reflectance within ±1.5 stops of mid grey (ISO 14524).
 */
export function measureExposure(
  tone: ToneResponse,
  frameLight: FrameLight,
  capture: Capture,
  meanReflectance: number,
): ExposureResult {
  const metrics: Metric[] = [
    {
      name: 'tone.contrast',
      value: tone.contrast,
      unit: '1',
      uncertainty: tone.contrastUncertainty,
    },
  ];
  const stops = tone.lightStops(midToneLuminance);
  if (!stops) return { metrics, warnings: [outOfReach] };
  const bias = Math.log2(midGrey) - stops.value;
  metrics.unshift({
    name: 'exposure.bias',
    value: bias,
    unit: 'EV',
    uncertainty: stops.uncertainty,
  });
  const meter = meterBias(bias, stops.uncertainty, tone, frameLight, capture, meanReflectance);
  if (meter) metrics.push(meter);
  const [low, high] = tone.range;
  const extrapolated = midToneLuminance < low || midToneLuminance > high;
  return { metrics, warnings: extrapolated ? [beyondGreys] : [] };
}

/**
 * exposure.median, EV: log2 of the frame's median luminance over 0.18 (common practice), through the tone response where
 * there is one, so that a contrasty camera's median counts in stops of light.
 */
export function measureMedian(frameLight: FrameLight, tone: ToneResponse | null): Metric {
  const { median, medianUncertainty } = frameLight;
  // Half a bin of the histogram stands for a black frame, whose logarithm has no end.
  const value = Math.max(median, 1.5e-5);
  const relative = medianUncertainty / value / Math.LN2;
  const stops = tone
    ? Math.log2(tone.luminanceToLight(value) / tone.luminanceToLight(midGrey))
    : Math.log2(value / midGrey);
  const uncertainty = tone ? relative / tone.contrast : relative;
  return { name: 'exposure.median', value: stops, unit: 'EV', uncertainty };
}

/** clip.highlights and clip.shadows, % of all pixels; the uncertainty is that of counting. */
export function measureClipping({
  clippedHighlights,
  clippedShadows,
  pixels,
}: FrameLight): Metric[] {
  const metric = (name: string, value: number): Metric => ({
    name,
    value,
    unit: '%',
    uncertainty: Math.sqrt((value * (100 - value)) / pixels + (100 / pixels) ** 2),
  });
  return [metric('clip.highlights', clippedHighlights), metric('clip.shadows', clippedShadows)];
}

/** Exif programs in which the camera sets the exposure. */
export const automatic: ReadonlySet<string> = new Set([
  'program',
  'aperture-priority',
  'shutter-priority',
  'creative',
  'action',
  'portrait',
  'landscape',
]);

function meterBias(
  bias: number,
  biasUncertainty: number,
  tone: ToneResponse,
  frameLight: FrameLight,
  capture: Capture,
  meanReflectance: number,
): Metric | null {
  if (capture.program === null || !automatic.has(capture.program)) return null;
  const asked = Math.log2(midGrey / meanReflectance);
  // What the frame holds beyond the field, and where it is dark, is metered as well: the two means bound the doubt.
  const framed = meanLight(frameLight, tone);
  const doubt = Math.abs(Math.log2(framed / meanReflectance)) / Math.sqrt(12);
  return {
    name: 'exposure.meterBias',
    value: bias - (capture.exposureBias ?? 0) - asked,
    unit: 'EV',
    uncertainty: Math.hypot(biasUncertainty, Number.isFinite(doubt) ? doubt : 0),
  };
}

/** Mean relative light over the frame, from the luminance histogram. */
function meanLight({ histogram }: FrameLight, tone: ToneResponse): number {
  return histogram.reduce((sum, share, bin) => {
    const luminance = toLinear((bin + 0.5) / histogram.length);
    return sum + (share > 0 ? share * tone.luminanceToLight(luminance) : 0);
  }, 0);
}

const outOfReach: Warning = {
  code: 'exposure-out-of-reach',
  message:
    'The exposure is too far off for the greys to show by how much. Correct it by two stops or so and photograph again.',
};
const beyondGreys: Warning = {
  code: 'exposure-beyond-greys',
  message:
    'Code 118 lies beyond the greys that can be used, so the exposure is extrapolated. Correct the exposure and photograph again.',
};
