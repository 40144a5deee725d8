import { measureFringes } from './chromatic/measure-fringes.ts';
import type { DiscSample } from './colour/disc-sample.ts';
import { measureColour } from './colour/measure-colour.ts';
import { applyDoubts } from './doubt/doubt.ts';
import { doubtCompression } from './doubt/doubt-file.ts';
import { doubtRegistration } from './doubt/doubt-registration.ts';
import { doubtSharpness } from './doubt/doubt-sharpness.ts';
import { doubtSpots } from './doubt/doubt-spots.ts';
import { doubtLight, judgeDiscs } from './doubt/judge-discs.ts';
import { traceEdges } from './edge/trace-edges.ts';
import { MeasurementError } from './errors.ts';
import type { TonePoint } from './exposure/lent-tone.ts';
import { measureClipping, measureExposure, measureMedian } from './exposure/measure-exposure.ts';
import { measureFrame } from './exposure/measure-frame.ts';
import { sampleDiscs } from './exposure/sample-discs.ts';
import { samplePlateaus } from './exposure/sample-plateaus.ts';
import { measureTone, plotTone, type ToneResponse } from './exposure/tone.ts';
import { measureShading, type ShadingResult } from './field/measure-shading.ts';
import type { Capture, Frame } from './image.ts';
import { analysePlain, isPlainKind } from './kinds/analyse-plain.ts';
import { type ToldKind, tellKind, tellPlain } from './kinds/tell-kind.ts';
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
  /** What the photograph shows. Default auto: target when one is found, else told from the picture and its Exif. */
  readonly kind?: 'auto' | Kind;
  /** Which of the target's shapes to look for. Default auto. */
  readonly target?: 'auto' | Shape;
  /** Greys of the run's target shot, which lend kinds grey and flat the camera's tone response. Default: the sRGB curve is assumed. */
  readonly tone?: readonly TonePoint[];
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
  const stage: Stage = (name, work) => {
    const from = now();
    const result = work();
    options.onStage?.(name, now() - from);
    return result;
  };
  const start = now();
  // A frame without anything in it holds no target either.
  const plain = kind === 'auto' ? stage('kind', () => tellPlain(frame, capture)) : null;
  const registration =
    plain || kind === 'lag' || isPlainKind(kind)
      ? null
      : stage('registration', () => findTarget(frame, target, kind !== 'target'));
  const told = kind === 'auto' ? (plain ?? tellOther(frame, capture, registration)) : null;
  const shown = told?.kind ?? (kind === 'auto' ? 'scene' : kind);
  const analysePart = (): Part => {
    if (shown === 'lag') return stage('timing page', () => analyseLag(frame, capture));
    if (shown === 'ladder') {
      const light = registration && {
        registration,
        ...measureLight(frame, registration, stage),
      };
      return analyseLadder(frame, capture, light);
    }
    if (isPlainKind(shown)) return analysePlain(shown, frame, capture, options.tone, stage);
    if (!registration) throw new Error(`kind ${shown} without a registration`);
    return analyseTarget(frame, capture, registration, stage);
  };
  const registered = now();
  const part = analysePart();
  const end = now();
  return {
    version: analysisVersion,
    kind: shown,
    ...(told ? { kindConfidence: told.confidence } : {}),
    width: frame.width,
    height: frame.height,
    capture,
    ...part,
    warnings: [...warnOfCapture(capture), ...warnOfKind(told), ...part.warnings],
    milliseconds: {
      decode: 0,
      register: registered - start,
      measure: end - registered,
      total: end - start,
    },
  };
}

/** The rings stand in one order only and the corners must agree with a lens: no false target is known. */
const aTarget: ToldKind = { kind: 'target', confidence: 0.99 };

function tellOther(frame: Frame, capture: Capture, registration: Registration | null): ToldKind {
  return registration ? aTarget : tellKind(frame, capture);
}

/** Below this it is as well to be told what the picture was taken for. */
const unsure = 0.7;

function warnOfKind(told: ToldKind | null): Warning[] {
  if (!told || told.kind === 'target') return [];
  if (told.kind === 'scene') return [noTarget];
  return told.confidence < unsure ? [unsureKind(told.kind)] : [];
}

function unsureKind(kind: Kind): Warning {
  return {
    code: 'kind-unsure',
    message: `The picture was taken for one of kind ${kind}, but not surely. Say what it shows if that is wrong.`,
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
  const light = measureLight(frame, registration, stage);
  const { samples, tone, shading } = light;
  const metrics: Metric[] = [];
  const warnings: Warning[] = [
    ...warnOfRegistration(frame, registration),
    ...warnOfGreys(samples),
    ...light.warnings,
  ];
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
  const doubts = stage('doubts', () => [
    doubtRegistration(frame, registration),
    doubtSharpness(metrics),
    doubtSpots(frame, registration, metrics),
    doubtCompression(frame),
    doubtLight(samples, tone !== null, shading.metrics),
  ]);
  return {
    registration: registration.summary,
    metrics: applyDoubts(metrics, doubts),
    warnings: [...warnings, ...doubts.flatMap((doubt) => doubt.warnings)],
    plots,
  };
}

interface Light {
  samples: DiscSample[];
  tone: ToneResponse | null;
  shading: ShadingResult;
  warnings: Warning[];
}

/**
 * Tone response and shading need each other: a first response, blind to shading, is good enough to tell the shading by,
 * because the greys' order is shuffled round their circle; the second response is then read in even light.
 */
function measureLight(frame: Frame, registration: Registration, stage: Stage): Light {
  const raw = stage('discs', () => sampleDiscs(frame, registration));
  const blind = stage('tone', () => measureTone(frame, raw));
  const rough = stage('shading', () => measureShading(frame, registration, blind?.codeToLight));
  if (!blind) return { samples: raw, tone: null, shading: rough, warnings: [] };
  const { samples, warnings, hopeless } = stage('judging discs', () =>
    judgeDiscs(frame, raw, rough.correctionAt),
  );
  const plateaus = stage('plateaus', () => samplePlateaus(frame, registration)).map((plateau) => ({
    ...plateau,
    light: rough.correctionAt(plateau.x, plateau.y),
  }));
  const tone = hopeless ? null : stage('tone, again', () => measureTone(frame, samples, plateaus));
  if (!tone) return { samples, tone: hopeless ? null : blind, shading: rough, warnings };
  const shading = stage('shading, again', () =>
    measureShading(frame, registration, tone.codeToLight),
  );
  return { samples, tone, shading, warnings };
}

const noTarget: Warning = {
  code: 'no-target',
  message:
    'No target was found, so this was measured as an ordinary picture. If the target is in it, show all of it, upright or not, in even light.',
};
const toneMissing: Warning = {
  code: 'tone-missing',
  message:
    'Fewer than four greys can be used, so exposure and colour were not measured and light is told through the file’s own curve. Correct the exposure and show the whole target.',
};
