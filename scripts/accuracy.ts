import { type ChildProcess, fork } from 'node:child_process';
import { fileURLToPath } from 'node:url';
import { parseArgs } from 'node:util';
import { rows } from '../tests/accuracy/rows';
import type { SceneResult, SceneTask } from '../tests/accuracy/run-scene';
import { type SuiteName, suiteNames } from '../tests/accuracy/suites';
import { heading, line, type Summary, summarise } from '../tests/accuracy/summary';

const usage = `Usage: npm run test:accuracy -- [--seeds 200] [--only WORD] [--seed N] [--verbose] [--png] [--workers 2]
  --only     rows or suites whose name contains the word (mtf50, fringe, registration …)
  --seed     that one scene of each suite
  --verbose  every sample of every scene, and the plans
  --png      the same scenes without JPEG: shows what compression costs`;

interface Options {
  seeds: number;
  only: string;
  seed: number | null;
  verbose: boolean;
  png: boolean;
  workers: number;
}

/** Renders the seeded scenes of measurements.md's "How close", analyses them and prints a line a quantity. Status 1 when one is short. */
async function main(): Promise<number> {
  const options = readOptions();
  if (!options) {
    console.error(usage);
    return 2;
  }
  const chosen = rows.filter(
    ({ name, suites }) =>
      name.includes(options.only) || suites.some((s) => s === options.only) || !options.only,
  );
  const suites = suiteNames.filter((s) => chosen.some((row) => row.suites.includes(s)));
  const results = await runAll(tasksOf(suites, options), options);
  const judgeCoverage = results.length >= 100 * suites.length;
  const summaries = chosen.map((row) => summarise(row, results, judgeCoverage));
  console.log(heading);
  for (const summary of summaries) console.log(line(summary));
  tellFailures(results);
  for (const summary of summaries.filter(({ short }) => short.length > 0))
    tellWorst(summary, results);
  return summaries.some(({ short }) => short.length > 0) ? 1 : 0;
}

function readOptions(): Options | null {
  try {
    const { values } = parseArgs({
      options: {
        seeds: { type: 'string', default: process.env.ACCURACY_SEEDS ?? '200' },
        only: { type: 'string', default: '' },
        seed: { type: 'string' },
        verbose: { type: 'boolean', default: false },
        png: { type: 'boolean', default: false },
        workers: { type: 'string', default: '2' },
      },
    });
    return {
      ...values,
      seeds: Number(values.seeds),
      workers: Number(values.workers),
      seed: values.seed === undefined ? null : Number(values.seed),
    };
  } catch {
    return null;
  }
}

function tasksOf(suites: readonly SuiteName[], options: Options): SceneTask[] {
  const seeds =
    options.seed === null ? Array.from({ length: options.seeds }, (_, i) => i) : [options.seed];
  return suites.flatMap((suite) => seeds.map((seed) => ({ suite, seed, png: options.png })));
}

type Answer = { result: SceneResult } | { task: SceneTask; error: string };

async function runAll(tasks: readonly SceneTask[], options: Options): Promise<SceneResult[]> {
  const waiting = [...tasks];
  const results: SceneResult[] = [];
  const path = fileURLToPath(new URL('../tests/accuracy/scene-worker.ts', import.meta.url));
  const work = async () => {
    // The structured clone keeps infinite errors, which JSON would turn into null.
    const child = fork(path, { execArgv: ['--import', 'tsx'], serialization: 'advanced' });
    for (let task = waiting.shift(); task; task = waiting.shift()) {
      const answer = await ask(child, task);
      if ('error' in answer) {
        child.kill();
        throw new Error(`${answer.task.suite} seed ${answer.task.seed}: ${answer.error}`);
      }
      results.push(answer.result);
      if (options.verbose) tell(answer.result);
    }
    child.kill();
  };
  await Promise.all(Array.from({ length: Math.min(options.workers, tasks.length) }, work));
  return results;
}

function ask(child: ChildProcess, task: SceneTask): Promise<Answer> {
  return new Promise((resolve, reject) => {
    child.once('message', (answer) => resolve(answer as Answer));
    child.once('exit', (code) =>
      reject(new Error(`the worker ended (${code}) at ${task.suite} seed ${task.seed}`)),
    );
    child.send(task);
  }).finally(() => child.removeAllListeners('exit')) as Promise<Answer>;
}

function tell(result: SceneResult): void {
  console.log(`${result.suite} seed ${result.seed}: ${JSON.stringify(result.plan)}`);
  for (const { quantity, where, truth, error, uncertainty } of result.samples)
    console.log(
      `  ${quantity} ${where}: truth ${truth.toFixed(4)} error ${error.toFixed(4)} u ${uncertainty?.toFixed(4) ?? '–'}`,
    );
}

function tellFailures(results: readonly SceneResult[]): void {
  for (const { suite, seed, failure, plan } of results)
    if (failure)
      console.log(`not measured: ${suite} seed ${seed}: ${failure}\n  ${JSON.stringify(plan)}`);
}

/** The three scenes that err most, with the command that shows them again. */
function tellWorst({ row }: Summary, results: readonly SceneResult[]): void {
  const worst = results
    .filter(({ suite }) => row.suites.includes(suite))
    .map((result) => {
      const mine = result.samples.filter(({ quantity }) => quantity === row.quantity);
      return { result, error: Math.max(...mine.map(({ error }) => Math.abs(error))) };
    })
    .sort((a, b) => b.error - a.error)
    .slice(0, 3);
  console.log(`\n${row.name}: the worst scenes`);
  for (const { result, error } of worst) {
    const { suite, seed, plan } = result;
    console.log(
      `  ${error.toFixed(4)} ${row.unit}: npm run test:accuracy -- --only ${suite} --seed ${seed} --verbose`,
    );
    console.log(`    ${JSON.stringify(plan)}`);
  }
}

process.exitCode = await main();
