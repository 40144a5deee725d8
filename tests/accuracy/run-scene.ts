import { analyseBytes } from '../../analysis/analyse-bytes.ts';
import { MeasurementError } from '../../analysis/errors.ts';
import type { ScenePlan } from '../../fixtures/scene/plan.ts';
import { renderScene } from '../../fixtures/scene/render.ts';
import { sceneTruth } from '../../fixtures/scene/truth.ts';
import { rows } from './rows.ts';
import { runLadder, runTiming } from './run-group.ts';
import { runPlain } from './run-plain.ts';
import { type Sample, samplesOf } from './samples.ts';
import {
  type GroupSuite,
  groupSuites,
  type PlainSuite,
  plainSuites,
  planOf,
  type SuiteName,
} from './suites.ts';

export interface SceneTask {
  suite: SuiteName;
  seed: number;
  /** Sees what the file format costs: the same scene as a PNG. */
  png?: boolean;
}

export interface SceneResult extends SceneTask {
  /** What was rendered, to be printed. */
  plan: object;
  samples: Sample[];
  /** What the analysis said when it measured nothing. */
  failure: string | null;
}

const isGroupSuite = (suite: SuiteName): suite is GroupSuite =>
  groupSuites.some((name) => name === suite);

const isPlainSuite = (suite: SuiteName): suite is PlainSuite =>
  plainSuites.some((name) => name === suite);

async function runGroup(task: SceneTask, suite: GroupSuite): Promise<SceneResult> {
  const run = suite === 'ladder' ? runLadder : runTiming;
  return { ...task, ...(await run(task.seed)), failure: null };
}

/** Renders one seeded scene, analyses it and keeps the samples that the suite's rows ask for. */
export async function runScene(task: SceneTask): Promise<SceneResult> {
  const { suite } = task;
  if (isGroupSuite(suite)) return runGroup(task, suite);
  if (isPlainSuite(suite)) return { ...task, ...(await runPlain(suite, task.seed)), failure: null };
  const drawn = planOf(suite, task.seed);
  const plan: ScenePlan = task.png ? { ...drawn, format: { type: 'png' } } : drawn;
  const { bytes } = await renderScene(plan);
  const wanted = new Set(rows.filter((r) => r.suites.includes(task.suite)).map((r) => r.quantity));
  const keep = (samples: Sample[]) => samples.filter(({ quantity }) => wanted.has(quantity));
  try {
    const analysis = await analyseBytes(bytes, { kind: 'target' });
    return { ...task, plan, samples: keep(samplesOf(analysis, sceneTruth(plan))), failure: null };
  } catch (error) {
    if (!(error instanceof MeasurementError)) throw error;
    const nothing = { metrics: [], warnings: [], plots: {} } as unknown as Parameters<
      typeof samplesOf
    >[0];
    const samples = keep(samplesOf(nothing, sceneTruth(plan)));
    return { ...task, plan, samples, failure: `${error.code}: ${error.message}` };
  }
}
