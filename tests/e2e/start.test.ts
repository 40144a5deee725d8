import { type ChildProcess, spawn } from 'node:child_process';
import { mkdtempSync, readdirSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, expect, test } from 'vitest';

const folder = mkdtempSync(join(tmpdir(), 'mendlight-start-'));
const started: ChildProcess[] = [];
afterAll(async () => {
  for (const child of started) child.kill('SIGTERM');
  await until(() => processes().length === 0, 20_000);
  rmSync(folder, { recursive: true, force: true });
});

async function until(what: () => boolean, patienceMs: number): Promise<void> {
  const deadline = Date.now() + patienceMs;
  while (!what()) {
    if (Date.now() > deadline) throw new Error(`Not within ${patienceMs} ms: ${what}`);
    await new Promise((resolve) => setTimeout(resolve, 50));
  }
}

/** Everything that was started for our folder: their command line or environment names it. */
function processes(): number[] {
  return readdirSync('/proc')
    .filter((name) => /^\d+$/.test(name) && Number(name) !== process.pid)
    .map(Number)
    .filter((pid) => {
      try {
        const line = readFileSync(`/proc/${pid}/cmdline`, 'utf8');
        return (
          line.includes(folder) || readFileSync(`/proc/${pid}/environ`, 'utf8').includes(folder)
        );
      } catch {
        return false;
      }
    });
}

const hasEnded = (child: ChildProcess) => child.exitCode !== null || child.signalCode !== null;

async function start(): Promise<{ child: ChildProcess; output: () => string; url: string }> {
  const child = spawn(process.execPath, ['scripts/start.mjs'], {
    env: { ...process.env, DATA: folder, PORT: '3700' },
    stdio: ['ignore', 'pipe', 'pipe'],
  });
  started.push(child);
  let output = '';
  const keep = (chunk: Buffer) => {
    output += chunk;
  };
  child.stdout.on('data', keep);
  child.stderr.on('data', keep);
  await until(() => output.includes('Ready.') || child.exitCode !== null, 120_000);
  const url = /Mendlight is at (\S+)/.exec(output)?.[1];
  if (!url) throw new Error(output);
  return { child, output: () => output, url };
}

test('starts on an empty folder, ends at SIGTERM with all it started, survives kill -9, and finds its data again', async () => {
  const first = await start();
  expect(first.output()).toContain('0001-people');
  expect(first.output()).toContain('ines@quayside.example');
  expect((await fetch(`${first.url}/sign-in`)).status).toBe(200);

  first.child.kill('SIGTERM');
  await until(() => processes().length === 0 && hasEnded(first.child), 30_000);
  expect(first.child.exitCode).toBe(0);

  const second = await start();
  expect(second.output()).toContain('up to date');
  second.child.kill('SIGKILL');
  await until(() => processes().length === 0, 30_000);

  const third = await start();
  const log = readFileSync(join(folder, 'seed.log'), 'utf8');
  expect(log).not.toContain('Error');
  third.child.kill('SIGINT');
  await until(() => processes().length === 0 && hasEnded(third.child), 30_000);
  expect(third.child.exitCode).toBe(0);
});
