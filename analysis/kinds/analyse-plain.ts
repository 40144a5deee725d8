import { lightScale, type TonePoint } from '../exposure/lent-tone.ts';
import { measureClipping, measureMedian } from '../exposure/measure-exposure.ts';
import { measureFrame } from '../exposure/measure-frame.ts';
import type { Capture, Frame } from '../image.ts';
import type { Analysis, Metric, Plots, Warning } from '../result.ts';
import { measureDark } from './measure-dark.ts';
import { measureFlat } from './measure-flat.ts';
import { measureGrey } from './measure-grey.ts';
import { measureScene } from './measure-scene.ts';

/** Kinds of photograph in which no target is looked for. */
export type PlainKind = 'grey' | 'flat' | 'dark' | 'scene';

export function isPlainKind(kind: string): kind is PlainKind {
  return kind === 'grey' || kind === 'flat' || kind === 'dark' || kind === 'scene';
}

type Part = Pick<Analysis, 'metrics' | 'warnings' | 'plots'>;
type Stage = <T>(name: string, work: () => T) => T;

/**
 * What a photograph without a target gives, with the median and the clipping that every kind has.
 * @param tone the greys of the run's target shot, when it lends its tone response
 * @throws MeasurementError when the picture isn't of that kind
 */
export function analysePlain(
  kind: PlainKind,
  frame: Frame,
  capture: Capture,
  tone: readonly TonePoint[] | undefined,
  stage: Stage,
): Part {
  const scale = lightScale(frame, tone);
  const own: { metrics: Metric[]; warnings: Warning[]; plots?: Partial<Plots> } = stage(
    kind,
    () => {
      if (kind === 'dark') return measureDark(frame);
      if (kind === 'grey') return measureGrey(frame, capture, scale);
      if (kind === 'flat') return measureFlat(frame, scale);
      return measureScene(frame);
    },
  );
  const light = stage('histograms and clipping', () => measureFrame(frame));
  // A dark frame's stops mean nothing, whatever the curve.
  const assumed = !scale.lent && kind !== 'dark';
  return {
    metrics: [...own.metrics, measureMedian(light, null), ...measureClipping(light)],
    warnings: [...own.warnings, ...(assumed ? [toneAssumed] : [])],
    plots: {
      histogram: light.histogram,
      histogramByChannel: light.histogramByChannel,
      ...own.plots,
    },
  };
}

const toneAssumed: Warning = {
  code: 'tone-assumed',
  message:
    'Without the target’s greys, stops are told through the sRGB curve. Photograph the target for the camera’s own tone response.',
};
