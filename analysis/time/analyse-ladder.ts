import type { DiscSample } from '../colour/disc-sample.ts';
import { measureClipping, measureExposure, measureMedian } from '../exposure/measure-exposure.ts';
import { measureFrame } from '../exposure/measure-frame.ts';
import { isGrey, plotTone, type ToneResponse } from '../exposure/tone.ts';
import type { Capture, Frame } from '../image.ts';
import { plotDiscs, plotOutline } from '../plots.ts';
import type { Analysis, Warning } from '../result.ts';
import type { Registration } from '../target/registration.ts';
import { warnOfGreys } from '../warnings.ts';

/** What is read of the target in one frame, `light` filled in where the shading could be told. */
export interface RungLight {
  readonly registration: Registration;
  readonly samples: readonly DiscSample[];
  readonly tone: ToneResponse | null;
}

/**
 * One rung of an exposure ladder: its exposure, and the greys that `measureLadder` compares over the rungs. Without a target only
 * the frame's median, for what a null method can tell.
 */
export function analyseLadder(
  frame: Frame,
  capture: Capture,
  light: RungLight | null,
): Pick<Analysis, 'registration' | 'metrics' | 'warnings' | 'plots'> {
  const frameLight = measureFrame(frame);
  const tone = light?.tone ?? null;
  const exposure =
    light && tone
      ? measureExposure(tone, frameLight, capture, light.registration.target.meanReflectance)
      : { metrics: [], warnings: [] };
  const { histogram, histogramByChannel } = frameLight;
  return {
    ...(light ? { registration: light.registration.summary } : {}),
    metrics: [...exposure.metrics, measureMedian(frameLight, tone), ...measureClipping(frameLight)],
    warnings: light ? [...warnOfGreys(light.samples), ...exposure.warnings] : [noGreys],
    plots: { histogram, histogramByChannel, ...(light ? plotsOf(light) : {}) },
  };
}

function plotsOf({ registration, samples }: RungLight): Partial<Analysis['plots']> {
  const greys = samples.filter((s) => isGrey(s) && !s.clipped && s.luminance > 0);
  return {
    outline: plotOutline(registration),
    tone: plotTone(samples),
    discs: plotDiscs(samples),
    greys: greys.map(({ disc, light, luminance, luminanceUncertainty }) => ({
      light: (disc.reflectance ?? 0) * light,
      luminance,
      uncertainty: luminanceUncertainty,
    })),
  };
}

const noGreys: Warning = {
  code: 'no-greys',
  message:
    'No target was found, so light can’t be read in stops. Photograph the ladder of the target, all of it in the frame.',
};
