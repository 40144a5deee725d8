import type { Analysis, GroupResult, Metric, Warning } from '../result.ts';
import { combineRepeats } from '../statistics/combine.ts';
import { modifiedZScores } from '../statistics/outliers.ts';

/**
 * How far a person who follows the sweep presses the release off the mark, standard uncertainty, ms: what doesn't average out over a
 * series, since the same hand is early or late by habit. Common practice for anticipated movements, no source.
 */
export const personUncertainty = 12;
/** A series of this many is asked for (the capture plan); ISO 15781 asks for ten or more (from memory). */
const wantedShots = 5;
/** Iglewicz & Hoaglin 1993, from memory; and no shot nearer than this to the middle, ms, counts as missed. */
const outlying = 3.5;
const leastMiss = 100;

/** Standard uncertainty of one reading, ms: the start lies anywhere within a frame of the screen (rectangular, JCGM 100 4.3.7). */
export function readingUncertainty(frameTime: number): number {
  return frameTime / Math.sqrt(12);
}

/** lag.shutter of one photograph: reading and person together. */
export function shotLag({ frameTime, elapsed }: { frameTime: number; elapsed: number }): Metric {
  return {
    name: 'lag.shutter',
    value: elapsed,
    unit: 'ms',
    uncertainty: Math.hypot(readingUncertainty(frameTime), personUncertainty),
  };
}

/**
 * lag.shutter, ms: shooting time lag (ISO 15781), from pressing the release as the hand passes the mark to the start of the exposure;
 * mean of a series of photographs of the timing page. Its uncertainty: the series' scatter over √n or the screen's frame, whichever
 * is larger, and the person's habit. Not meant for cameras that fill a buffer before the release.
 */
export function measureLag(
  shots: readonly { name: string; timing: NonNullable<Analysis['plots']['timing']> }[],
): GroupResult {
  const warnings: Warning[] = [];
  if (shots.length === 0) return { metrics: [], warnings: [noneRead] };
  const { mean, standardUncertainty } = combineRepeats(
    shots.map(({ timing }) => ({
      value: timing.elapsed,
      uncertainty: readingUncertainty(timing.frameTime),
    })),
  );
  if (shots.length < wantedShots) warnings.push(fewShots(shots.length));
  const scores = modifiedZScores(shots.map(({ timing }) => timing.elapsed));
  shots.forEach(({ name, timing }, i) => {
    const far = Math.abs(timing.elapsed - mean) > leastMiss;
    if (far && Math.abs(scores[i]!) > outlying) warnings.push(missed(name, timing.elapsed));
  });
  if (mean < 0) warnings.push(beforeMark);
  return {
    metrics: [
      {
        name: 'lag.shutter',
        value: mean,
        unit: 'ms',
        uncertainty: Math.hypot(standardUncertainty, personUncertainty),
      },
    ],
    warnings: [...warnings, personCounts],
  };
}

const noneRead: Warning = {
  code: 'lag-none-read',
  message:
    'In no photograph could the timing page be read. Show all of it, in focus, with a short exposure time.',
};
const personCounts: Warning = {
  code: 'lag-by-hand',
  message: `The release was pressed by hand: ${personUncertainty} ms for the person’s habit are part of the uncertainty, however many shots there are.`,
};
const beforeMark: Warning = {
  code: 'lag-before-mark',
  message:
    'The photographs were taken before the hand reached the mark. Press just when it passes the mark, and photograph again.',
};

function fewShots(count: number): Warning {
  return {
    code: 'lag-few-shots',
    message: `${count} photograph${count === 1 ? '' : 's'} of the timing page could be read. Take ${wantedShots}, so that the scatter shows.`,
  };
}

function missed(name: string, elapsed: number): Warning {
  return {
    code: 'lag-outlier',
    message: `${name} shows ${Math.round(elapsed)} ms, far from the others; it counts in the mean. If the mark was missed, leave it out and photograph again.`,
  };
}
