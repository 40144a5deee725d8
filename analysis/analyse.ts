import { measureFringes } from './chromatic/measure-fringes.ts';
import type { DiscSample } from './colour/disc-sample.ts';
import { measureColour } from './colour/measure-colour.ts';
import { traceEdges } from './edge/trace-edges.ts';
import { MeasurementError } from './errors.ts';
import { measureClipping, measureExposure, measureMedian } from './exposure/measure-exposure.ts';
import { measureFrame } from './exposure/measure-frame.ts';
import { sampleDiscs } from './exposure/sample-discs.ts';
import { measureTone, plotTone, type ToneResponse } from './exposure/tone.ts';
import { measureShading, type ShadingResult } from './field/measure-shading.ts';
import type { Capture, Frame } from './image.ts';
import { measureNoise } from './noise/measure-noise.ts';
import { plotDiscs, plotOutline, plotStations } from './plots.ts';
import type { Analysis, Kind, Metric, Plots, Shape, Warning } from './result.ts';
import { measureSharpness } from './sharpness/measure-sharpness.ts';
import { registerTarget } from './target/register.ts';
import type { Registration } from './target/registration.ts';
import { analyseLadder } from './time/analyse-ladder.ts';
import { analyseLag } from './time/analyse-lag.ts';
import { warnOfCapture, warnOfGreys, warnOfLight, warnOfRegistration } from './warnings.ts';

/** Raised whenever a number can change. */
export const analysisVersion = '1.0.0';

export interface AnalyseOptions {
  /** What the photograph shows. Default auto: target when one is found, else scene. */
  readonly kind?: 'auto' | Kind;
  /** Which of the target's shapes to look for. Default auto. */
  readonly target?: 'auto' | Shape;
  /** Milliseconds from any start; the browser's and Node's performance.now is finer than the default Date.now. */
  readonly now?: () => number;
  /** Told how long each stage took, for benchmarks. */
  readonly onStage?: (name: string, milliseconds: number) => void;
}

/** Runs a stage and reports its time. */
type Stage = <T>(name: string, work: () => T) => T;

type Part = Pick<Analysis, 'registration' | 'metrics' | 'warnings' | 'plots'>;

/**
 * Every quantity that a photograph gives, from its pixels and its metadata. `milliseconds.decode` is the caller's to fill in.
 * @throws MeasurementError when the photograph can't be measured as the kind asked for
 */
export function analyseFrame(
  frame: Frame,
  capture: Capture,
  options: AnalyseOptions = {},
): Analysis {
  const { kind = 'auto', target = 'auto', now = Date.now } = options;
  if (kind === 'grey' || kind === 'flat' || kind === 'dark') {
    throw new MeasurementError(
      'kind-not-supported',
      `Photographs of kind ${kind} can’t be measured yet. Use kind target, scene or auto.`,
    );
  }
  const stage: Stage = (name, work) => {
    const from = now();
    const result = work();
    options.onStage?.(name, now() - from);
    return result;
  };
  const analysePart = (): Part => {
    if (kind === 'lag') return stage('timing page', () => analyseLag(frame, capture));
    if (kind === 'ladder') {
      const light = registration && {
        registration,
        ...measureLight(frame, registration, stage),
      };
      return analyseLadder(frame, capture, light);
    }
    return registration
      ? analyseTarget(frame, capture, registration, stage)
      : analyseScene(frame, kind === 'auto');
  };
  const start = now();
  const registration =
    kind === 'scene' || kind === 'lag'
      ? null
      : stage('registration', () => findTarget(frame, target, kind !== 'target'));
  const registered = now();
  const part = analysePart();
  const end = now();
  return {
    version: analysisVersion,
    kind: kind === 'auto' ? (registration ? 'target' : 'scene') : kind,
    width: frame.width,
    height: frame.height,
    capture,
    ...part,
    warnings: [...warnOfCapture(capture), ...part.warnings],
    milliseconds: {
      decode: 0,
      register: registered - start,
      measure: end - registered,
      total: end - start,
    },
  };
}

function findTarget(
  frame: Frame,
  target: 'auto' | Shape,
  mayBeAbsent: boolean,
): Registration | null {
  try {
    return registerTarget(frame, { target });
  } catch (error) {
    if (mayBeAbsent && error instanceof MeasurementError) return null;
    throw error;
  }
}

function analyseTarget(
  frame: Frame,
  capture: Capture,
  registration: Registration,
  stage: Stage,
): Part {
  const frameLight = stage('histograms and clipping', () => measureFrame(frame));
  const { samples, tone, shading } = measureLight(frame, registration, stage);
  const metrics: Metric[] = [];
  const warnings: Warning[] = [...warnOfRegistration(frame, registration), ...warnOfGreys(samples)];
  const plots: Plots = {
    histogram: frameLight.histogram,
    histogramByChannel: frameLight.histogramByChannel,
    outline: plotOutline(registration),
    tone: plotTone(samples),
    discs: plotDiscs(samples),
  };
  if (tone) {
    const { meanReflectance } = registration.target;
    const exposure = stage('exposure', () =>
      measureExposure(tone, frameLight, capture, meanReflectance),
    );
    const colour = stage('colour', () => measureColour(frame, samples, tone));
    metrics.push(...exposure.metrics, ...colour.metrics);
    warnings.push(...exposure.warnings, ...colour.warnings);
    plots.colours = colour.plots;
  } else {
    warnings.push(toneMissing);
  }
  metrics.push(measureMedian(frameLight, tone), ...measureClipping(frameLight));

  const traces = stage('edges', () =>
    traceEdges(frame, registration, tone?.toLight ?? frame.toLinear),
  );
  const fringes = stage('fringes', () =>
    measureFringes(frame, registration, traces, frame.chromaHalved ?? false),
  );
  const sharpness = stage('sharpness', () =>
    measureSharpness(frame, registration, traces, fringes),
  );
  metrics.push(...sharpness.metrics, ...fringes.metrics);
  warnings.push(...sharpness.warnings);
  plots.stations = plotStations(frame, registration, sharpness, fringes);

  const noise = stage('noise', () => measureNoise(frame, registration));
  metrics.push(...noise.metrics, ...shading.metrics);
  warnings.push(...noise.warnings, ...shading.warnings, ...warnOfLight(shading.metrics));
  if (shading.plot) plots.shading = shading.plot;
  metrics.push({
    name: 'distortion.corner',
    value: registration.distortion.corner,
    unit: '%',
    uncertainty: registration.distortion.uncertainty,
  });
  return { registration: registration.summary, metrics, warnings, plots };
}

interface Light {
  samples: DiscSample[];
  tone: ToneResponse | null;
  shading: ShadingResult;
}

/**
 * Tone response and shading need each other: a first response, blind to shading, is good enough to tell the shading by,
 * because the greys' order is shuffled round their circle; the second response is then read in even light.
 */
function measureLight(frame: Frame, registration: Registration, stage: Stage): Light {
  const raw = stage('discs', () => sampleDiscs(frame, registration));
  const blind = stage('tone', () => measureTone(frame, raw));
  const rough = stage('shading', () => measureShading(frame, registration, blind?.codeToLight));
  if (!blind) return { samples: raw, tone: null, shading: rough };
  const samples = raw.map((s) => ({ ...s, light: rough.correctionAt(s.x, s.y) }));
  const tone = stage('tone, again', () => measureTone(frame, samples));
  if (!tone) return { samples, tone: blind, shading: rough };
  const shading = stage('shading, again', () =>
    measureShading(frame, registration, tone.codeToLight),
  );
  return { samples, tone, shading };
}

function analyseScene(frame: Frame, searched: boolean): Part {
  const frameLight = measureFrame(frame);
  return {
    metrics: [measureMedian(frameLight, null), ...measureClipping(frameLight)],
    warnings: searched ? [noTarget, toneAssumed] : [toneAssumed],
    plots: {
      histogram: frameLight.histogram,
      histogramByChannel: frameLight.histogramByChannel,
    },
  };
}

const noTarget: Warning = {
  code: 'no-target',
  message:
    'No target was found, so this was measured as an ordinary picture. If the target is in it, show all of it, upright or not, in even light.',
};
const toneAssumed: Warning = {
  code: 'tone-assumed',
  message:
    'Without the target’s greys, stops are told through the sRGB curve. Photograph the target for the camera’s own tone response.',
};
const toneMissing: Warning = {
  code: 'tone-missing',
  message:
    'Fewer than four greys can be used, so exposure and colour were not measured and light is told through the file’s own curve. Correct the exposure and show the whole target.',
};
