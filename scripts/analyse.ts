import { readFile } from 'node:fs/promises';
import { parseArgs } from 'node:util';
import { z } from 'zod';
import type { AnalyseOptions } from '../analysis/analyse';
import { analyseBytes } from '../analysis/analyse-bytes';
import { MeasurementError } from '../analysis/errors';
import type { Analysis } from '../analysis/result';
import { isGroupKind, measureGroup } from '../analysis/time/group';
import { type FailureOutput, toAnalysisOutput, toGroupOutput } from '../lib/shared/analysis-output';

const usage =
  'Usage: npm run --silent analyse -- [--kind auto|target|grey|flat|dark|ladder|lag|scene] [--target auto|4x3|3x2] FILE...';

const optionsSchema = z.object({
  kind: z.enum(['auto', 'target', 'grey', 'flat', 'dark', 'ladder', 'lag', 'scene']),
  target: z.enum(['auto', '4x3', '3x2']),
});

/**
 * One JSON object a line, one a file, in the order given, and for a ladder or a series of the timing page one more of the group;
 * exit status 1 when a file couldn't be measured, 2 on wrong usage.
 */
async function main(): Promise<number> {
  const request = readArguments();
  if (!request) {
    console.error(usage);
    return 2;
  }
  const { kind = 'auto' } = request.options;
  const measured: { name: string; analysis: Analysis }[] = [];
  for (const file of request.files) {
    const answer = await analyseFile(file, request.options);
    const failed = 'error' in answer;
    print(failed ? answer : toAnalysisOutput(file, answer));
    // What a group keeps of a photograph is small: its pixels are gone.
    if (!failed) measured.push({ name: file, analysis: answer });
  }
  if (isGroupKind(kind)) {
    const names = measured.map(({ name }) => name);
    print(toGroupOutput(kind, names, measureGroup(kind, measured)));
  }
  return measured.length < request.files.length ? 1 : 0;
}

function print(line: object): void {
  process.stdout.write(`${JSON.stringify(line)}\n`);
}

function readArguments(): { files: string[]; options: AnalyseOptions } | null {
  try {
    const { values, positionals } = parseArgs({
      allowPositionals: true,
      options: {
        kind: { type: 'string', default: 'auto' },
        target: { type: 'string', default: 'auto' },
      },
    });
    const options = optionsSchema.safeParse(values);
    if (!options.success || positionals.length === 0) return null;
    return { files: positionals, options: options.data };
  } catch {
    // parseArgs throws on an option it doesn't know.
    return null;
  }
}

async function analyseFile(
  file: string,
  options: AnalyseOptions,
): Promise<Analysis | FailureOutput> {
  const bytes = await readFile(file).catch(() => null);
  if (!bytes) {
    const message = 'The file can’t be read. Check its name and that you may open it.';
    return { file, error: { code: 'file-unreadable', message } };
  }
  try {
    return await analyseBytes(bytes, options);
  } catch (error) {
    if (error instanceof MeasurementError) {
      return { file, error: { code: error.code, message: error.message } };
    }
    console.error(error);
    const message =
      'The analysis broke off: a fault in the program, told in full on standard error. Report it with the file.';
    return { file, error: { code: 'internal', message } };
  }
}

process.exitCode = await main();
