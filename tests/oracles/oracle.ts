import { spawnSync } from 'node:child_process';

/** Debian's own interpreter by its full path: the first python3 on PATH may lack the modules. */
const python = '/usr/bin/python3';

function answers(command: string, args: readonly string[]): boolean {
  const { status, error } = spawnSync(command, args, { stdio: 'ignore' });
  return !error && status === 0;
}

/** The foreign programs that check our numbers, and the Debian packages they come from. Each is looked for once. */
const oracles = {
  python: {
    packages: 'python3-numpy, python3-scipy and python3-opencv',
    found: () => answers(python, ['-c', 'import numpy, scipy, cv2']),
  },
  imagemagick: { packages: 'imagemagick', found: () => answers('convert', ['-version']) },
  exiftool: { packages: 'libimage-exiftool-perl', found: () => answers('exiftool', ['-ver']) },
};

export type Oracle = keyof typeof oracles;

/**
 * True when any of the programs is missing: for `test.skipIf(missing('python'))`. The test then counts as skipped, and the reason is
 * printed.
 */
export function missing(...names: Oracle[]): boolean {
  const absent = names.filter((name) => !oracles[name].found());
  for (const name of absent)
    console.warn(`skipped: ${name} isn't installed (Debian: ${oracles[name].packages})`);
  return absent.length > 0;
}

/** Runs a Python script that prints one JSON value. */
export function runPython(script: string, args: readonly string[] = []): unknown {
  return JSON.parse(run(python, ['-c', script, ...args]));
}

/** Runs a program and returns what it printed; throws with its complaint when it fails. */
export function run(command: string, args: readonly string[]): string {
  const { status, stdout, stderr, error } = spawnSync(command, args, {
    encoding: 'utf8',
    maxBuffer: 1 << 28,
  });
  if (error || status !== 0) throw new Error(`${command} failed: ${error?.message ?? stderr}`);
  return stdout;
}
