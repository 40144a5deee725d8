import { spawn } from 'node:child_process';
import { fileURLToPath } from 'node:url';
import { afterAll, beforeEach, expect, test } from 'vitest';
import { db } from '@/lib/server/db';
import { runLanes } from '@/lib/server/lanes';
import { claim, complete, enqueue, extend, giveBack, type Handler } from '@/lib/server/queue';
import { newId } from '@/models/id';

const kind = 'analyse-shot';
beforeEach(async () => {
  await db().Job.destroy({ where: { kind } });
});
afterAll(async () => {
  await db().sequelize.close();
});

async function add(subjectId = newId(), runAfter = new Date()): Promise<string> {
  await db().sequelize.transaction((t) => enqueue(t, { kind, subjectId, runAfter }));
  return subjectId;
}

async function until(what: () => Promise<boolean> | boolean, patienceMs = 10_000): Promise<void> {
  const deadline = Date.now() + patienceMs;
  while (!(await what())) {
    if (Date.now() > deadline) throw new Error('It did not come to pass in time.');
    await new Promise((resolve) => setTimeout(resolve, 20));
  }
}

test('a job appears with its transaction or not at all', async () => {
  const adding = db().sequelize.transaction(async (t) => {
    await enqueue(t, { kind, subjectId: newId() });
    throw new Error('changed my mind');
  });
  await expect(adding).rejects.toThrow('changed my mind');
  expect(await claim(kind, 'a', 1000)).toBeNull();
});

test('the same job waits once, and may wait again once it has been claimed', async () => {
  const subjectId = await add();
  await add(subjectId);
  expect(await db().Job.count({ where: { subjectId } })).toBe(1);
  expect(await claim(kind, 'a', 1000)).toMatchObject({ subjectId });
  await add(subjectId);
  await add(subjectId);
  expect(await db().Job.count({ where: { subjectId } })).toBe(2);
});

test('ten workers at once claim ten jobs, each once', async () => {
  const subjects = await Promise.all(Array.from({ length: 10 }, () => add()));
  const held = await Promise.all(subjects.map((_, i) => claim(kind, `worker ${i}`, 10_000)));
  // A claimer may find the one row it looks at locked and nothing else due; it looks again a moment later.
  for (const [i, one] of held.entries()) held[i] = one ?? (await claim(kind, `late ${i}`, 10_000));
  expect(new Set(held.map((one) => one?.subjectId))).toEqual(new Set(subjects));
});

test('a failed job waits longer each time and fails after five attempts', async () => {
  await add();
  const waits: number[] = [];
  for (let attempt = 1; attempt <= 5; attempt++) {
    const held = await claim(kind, `try ${attempt}`, 1000, new Date(Date.now() + 1e9));
    if (!held) throw new Error('nothing to claim');
    expect(held.attempts).toBe(attempt);
    const before = Date.now();
    expect(await giveBack(held, new Error('no luck'))).toBe(attempt < 5);
    const job = await db().Job.findByPk(held.id, { rejectOnEmpty: true });
    expect(job.error).toContain('no luck');
    if (job.state === 'pending') waits.push(Math.round((job.runAfter.getTime() - before) / 1000));
    else expect(job.state).toBe('failed');
  }
  expect(waits).toEqual([1, 4, 16, 64]);
});

test('a holder whose lease ran out can neither extend nor settle, and its writes are undone', async () => {
  await add(newId(), new Date(Date.now() - 10_000));
  const first = await claim(kind, 'slow', 1000, new Date(Date.now() - 5000));
  const waiting = await claim(kind, 'quick', 60_000);
  if (!first || !waiting) throw new Error('nothing to claim');
  expect(waiting.id).toBe(first.id);
  expect(await extend(first, 1000)).toBe(false);
  const settle = db().sequelize.transaction(async (t) => {
    await db().Attempt.create({ bucket: `undone ${first.id}` }, { transaction: t });
    await complete(t, first);
  });
  await expect(settle).rejects.toThrow('given to another worker');
  expect(await db().Attempt.count({ where: { bucket: `undone ${first.id}` } })).toBe(0);
  await db().sequelize.transaction((t) => complete(t, waiting));
});

test('lanes work on as many jobs at once as they are wide, wake on a new job and wait for the last', async () => {
  let atOnce = 0;
  let most = 0;
  const done: string[] = [];
  let meet = () => {};
  const met = new Promise<void>((resolve) => {
    meet = resolve;
  });
  const handler: Handler = {
    async work(subjectId) {
      most = Math.max(most, ++atOnce);
      if (atOnce === 2) meet();
      // The first waits for a second to be in hand beside it, however slow the machine; alone it gives up.
      await Promise.race([met, new Promise((resolve) => setTimeout(resolve, 5000))]);
      await new Promise((resolve) => setTimeout(resolve, 60));
      atOnce--;
      return async () => {
        done.push(subjectId);
      };
    },
    async failed() {},
  };
  // Longer than the test: only waking up can make the second job run.
  const lanes = runLanes([{ kind, handler, width: 2 }], { leaseMs: 5000, lookMs: 30_000 });
  const subjects = [await add(), await add(), await add()];
  await until(() => done.length === 3);
  subjects.push(await add());
  await until(async () => (await db().Job.count({ where: { kind, state: 'running' } })) > 0);
  await lanes.stop();
  expect(new Set(done)).toEqual(new Set(subjects));
  expect(done).toHaveLength(4);
  expect(most).toBe(2);
});

test('a job that is in hand when the process ends is given back and does not count as an attempt', async () => {
  const subjectId = await add();
  const handler: Handler = {
    work: (_subject, signal) =>
      new Promise((_resolve, reject) => {
        signal.addEventListener('abort', () => reject(signal.reason));
      }),
    async failed() {},
  };
  const lanes = runLanes([{ kind, handler, width: 1 }], { leaseMs: 60_000, lookMs: 50 });
  await until(async () => (await db().Job.count({ where: { kind, state: 'running' } })) === 1);
  await lanes.stop();
  expect(await claim(kind, 'next', 1000)).toMatchObject({ subjectId, attempts: 1 });
});

test('after kill -9 of its holder a job is done by another, once', async () => {
  const subjectId = await add();
  const leaseMs = 1500;
  const script = fileURLToPath(new URL('holder.ts', import.meta.url));
  const holder = spawn(
    process.execPath,
    ['--conditions=react-server', '--import', 'tsx', script, String(leaseMs)],
    { stdio: ['ignore', 'pipe', 'inherit'] },
  );
  const gone = new Promise((resolve) => holder.once('exit', (_code, signal) => resolve(signal)));
  await new Promise((resolve) => holder.stdout.once('data', resolve));
  // Past the first lease: its heartbeat keeps the job.
  await new Promise((resolve) => setTimeout(resolve, leaseMs + 300));
  expect(await claim(kind, 'too early', leaseMs)).toBeNull();
  holder.kill('SIGKILL');
  expect(await gone).toBe('SIGKILL');

  const bucket = `result ${subjectId}`;
  const handler: Handler = {
    work: async () => async (transaction) => {
      await db().Attempt.create({ bucket }, { transaction });
    },
    async failed() {},
  };
  const lanes = runLanes([{ kind, handler, width: 2 }], { leaseMs: 5000, lookMs: 100 });
  await until(async () => (await db().Job.count({ where: { subjectId, state: 'done' } })) === 1);
  await lanes.stop();
  expect(await db().Attempt.count({ where: { bucket } })).toBe(1);
  expect((await db().Job.findOne({ where: { subjectId } }))?.attempts).toBe(2);
});
