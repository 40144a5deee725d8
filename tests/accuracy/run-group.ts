import { analyseBytes } from '../../analysis/analyse-bytes.ts';
import { MeasurementError } from '../../analysis/errors.ts';
import type { Analysis } from '../../analysis/result.ts';
import { median } from '../../analysis/statistics/outliers.ts';
import { measureGroup } from '../../analysis/time/group.ts';
import { renderTimingPage } from '../../fixtures/scene/timing-page.ts';
import { photographLadder, rungsOf, rungTimes } from '../analysis/time/ladder-scenes.ts';
import { drawTimingScene, elapsedTruth } from '../analysis/time/timing-scenes.ts';
import type { Sample } from './samples.ts';
import { type Dice, diceOf, jpeg, rendering, stand } from './suites.ts';

interface GroupRun {
  plan: object;
  samples: Sample[];
}

/** Five rungs a stop apart, −2 to +2 EV about −0.5 … −0.2, so that none clips, each off by up to 0.15 EV; the camera as in suite `exposure`. */
export async function runLadder(seed: number): Promise<GroupRun> {
  const dice = diceOf('ladder', seed);
  const scene = {
    ...stand(dice),
    ...rendering(dice),
    blurSigma: dice.between(0.5, 1.2),
    lightTiltEv: dice.between(-0.2, 0.2),
    snrDb: dice.between(28, 44),
    format: jpeg(dice.between(85, 98), dice.pick(['4:4:4', '4:2:0'] as const)),
    seed: seed + 1,
  };
  const planted = rungTimes.map(() => dice.between(-0.15, 0.15));
  const base = dice.between(-0.5, -0.2);
  const { metrics } = await photographLadder(scene, rungsOf(base, planted));
  const samples = rungTimes.map(([label], i): Sample => {
    const zone = `1/${Math.round(1 / label)}`;
    const metric = metrics.find((m) => m.name === 'ladder.step' && m.zone === zone);
    const truth = planted[i]! - median(planted);
    return {
      quantity: 'ladder.step',
      where: zone,
      truth,
      error: metric ? metric.value - truth : Number.POSITIVE_INFINITY,
      uncertainty: metric ? metric.uncertainty : null,
    };
  });
  return { plan: { ...scene, base, planted }, samples };
}

/**
 * Five photographs of the timing page with one planted lag, pressed by a hand that is early or late by habit (12 ms) and from shot to
 * shot (8 ms). A photograph is judged by what it shows, the mean by the lag.
 */
export async function runTiming(seed: number): Promise<GroupRun> {
  const dice = diceOf('timing', seed);
  const frameTime = 16.67;
  const lag = dice.between(40, 1500);
  const habit = 12 * normal(dice);
  const shots: { name: string; analysis: Analysis }[] = [];
  const samples: Sample[] = [];
  for (let i = 0; i < 5; i++) {
    const shown = lag + habit + 8 * normal(dice);
    // The hand is seen to pass the mark in the middle of frame 0.
    const plan = { ...drawTimingScene(seed * 5 + i), startFrame: shown / frameTime + 0.5 };
    const truth = elapsedTruth(plan);
    const analysis = await analyseOrNull(await renderTimingPage(plan));
    if (analysis) shots.push({ name: `${i}.jpg`, analysis });
    const read = analysis?.plots.timing?.elapsed ?? Number.POSITIVE_INFINITY;
    const error = read - truth;
    samples.push({ quantity: 'lag reading', where: `${i}`, truth, error, uncertainty: null });
  }
  const [mean] = measureGroup('lag', shots).metrics;
  samples.push({
    quantity: 'lag.shutter',
    where: '',
    truth: lag,
    error: mean ? mean.value - lag : Number.POSITIVE_INFINITY,
    uncertainty: mean ? mean.uncertainty : null,
  });
  return { plan: { lag, habit, first: drawTimingScene(seed * 5) }, samples };
}

async function analyseOrNull(bytes: Buffer): Promise<Analysis | null> {
  try {
    return await analyseBytes(bytes, { kind: 'lag' });
  } catch (error) {
    if (error instanceof MeasurementError) return null;
    throw error;
  }
}

/** Box and Muller, Ann. Math. Stat. 29 (1958) 610. */
function normal(dice: Dice): number {
  return Math.sqrt(-2 * Math.log(1 - dice.between(0, 1))) * Math.cos(dice.between(0, 2 * Math.PI));
}
