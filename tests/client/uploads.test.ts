import { createHash, randomBytes } from 'node:crypto';
import { describe, expect, test } from 'vitest';
import { ApiError, problemOf } from '@/lib/client/api';
import { refusalOf, secondsLeft } from '@/lib/client/files';
import { hashFile } from '@/lib/client/hash';
import { UploadQueue, type UploadSteps } from '@/lib/client/uploads';
import type { ShotRow } from '@/lib/shared/api';

// Independent implementation: Node's own SHA-256, over a size that does not divide into the chunks.
test.each([0, 1, 4 * 1024 * 1024, 9 * 1024 * 1024 + 17])('hash of %d bytes', async (size) => {
  const bytes = randomBytes(size);
  const expected = createHash('sha256').update(bytes).digest('hex');
  expect(await hashFile(new Blob([bytes]))).toBe(expected);
});

test('hashing stops when asked', async () => {
  await expect(hashFile(new Blob([randomBytes(10)]), AbortSignal.abort())).rejects.toThrow();
});

/** A server in memory: what it holds, what it was asked, and what it answers wrongly. */
function store(faults: (() => void)[] = []) {
  const held = new Set<string>();
  const added: string[] = [];
  const state = { puts: 0, open: 0, most: 0, waits: [] as number[] };
  const steps: UploadSteps = {
    hash: hashFile,
    known: async (sha256) => held.has(sha256),
    put: async (sha256, file, progress) => {
      state.puts++;
      state.most = Math.max(state.most, ++state.open);
      await new Promise((resolve) => setTimeout(resolve, 5));
      state.open--;
      faults.shift()?.();
      progress(file.size);
      held.add(sha256);
    },
    add: async (sha256, name) => {
      added.push(name);
      return { id: sha256, name } as ShotRow;
    },
    wait: async (milliseconds) => void state.waits.push(milliseconds),
  };
  return { steps, held, added, state };
}

const file = (name: string, content = name) => new File([content], name);
const settled = async (queue: UploadQueue) => {
  const busy = () => queue.snapshot().some((u) => /waiting|reading|sending/.test(u.stage));
  while (busy()) await new Promise((resolve) => setTimeout(resolve, 2));
};
const fail = (status: number, message: string) => () => {
  throw new ApiError(status, message);
};

describe('upload queue', () => {
  test('sends every file, at most three at a time', async () => {
    const { steps, added, state } = store();
    const shots: ShotRow[] = [];
    const queue = new UploadQueue(steps, (shot) => shots.push(shot));
    const names = Array.from({ length: 10 }, (_, i) => `p${i}.jpg`);
    queue.add(names.map((name) => file(name)));
    await settled(queue);
    expect([...added].sort()).toEqual([...names].sort());
    expect(shots).toHaveLength(10);
    expect(state.most).toBe(3);
  });

  test('the same picture twice in a drop crosses the line once, and both become shots', async () => {
    const { steps, added, state } = store();
    const queue = new UploadQueue(steps, () => undefined);
    queue.add([file('a.jpg', 'same'), file('b.jpg', 'same')]);
    await settled(queue);
    expect(state.puts).toBe(1);
    expect(added).toHaveLength(2);
  });

  test('an original that the shop holds is not sent', async () => {
    const { steps, held, state } = store();
    held.add(createHash('sha256').update('known').digest('hex'));
    const queue = new UploadQueue(steps, () => undefined);
    queue.add([file('a.jpg', 'known')]);
    await settled(queue);
    expect(state.puts).toBe(0);
    expect(queue.snapshot()[0]).toMatchObject({ stage: 'done', known: true });
  });

  test('a refusal is shown in the server’s words, not tried again, and leaves the others alone', async () => {
    const { steps, state } = store([fail(415, 'This is not a photograph.')]);
    const queue = new UploadQueue(steps, () => undefined, 1);
    queue.add([file('a.jpg'), file('b.jpg')]);
    await settled(queue);
    expect(queue.snapshot().map((u) => [u.stage, u.message])).toEqual([
      ['refused', 'This is not a photograph.'],
      ['done', null],
    ]);
    expect(state.waits).toEqual([]);
  });

  test('a break in the line is tried again by itself', async () => {
    const { steps, state } = store([fail(0, 'Broke.'), fail(503, 'Busy.')]);
    const queue = new UploadQueue(steps, () => undefined);
    queue.add([file('a.jpg')]);
    await settled(queue);
    expect(queue.snapshot()[0]?.stage).toBe('done');
    expect(state.waits).toEqual([1000, 4000]);
  });

  test('after three breaks a person is asked, and a retry goes through', async () => {
    const { steps } = store([fail(0, 'Broke.'), fail(0, 'Broke.'), fail(0, 'Broke.')]);
    const queue = new UploadQueue(steps, () => undefined);
    queue.add([file('a.jpg')]);
    await settled(queue);
    const upload = queue.snapshot()[0];
    expect(upload).toMatchObject({ stage: 'failed', message: 'Broke.' });
    queue.retry(upload?.id ?? '');
    await settled(queue);
    expect(queue.snapshot()[0]?.stage).toBe('done');
  });

  test('what cannot be a picture is refused without being sent', async () => {
    const { steps, state } = store();
    const queue = new UploadQueue(steps, () => undefined);
    queue.add([file('a.mov'), new File([], 'empty.jpg')]);
    await settled(queue);
    expect(queue.snapshot().map((u) => u.stage)).toEqual(['refused', 'refused']);
    expect(state.puts).toBe(0);
  });
});

test.each([
  ['DSC_0001.JPG', 10, null],
  ['scan.tiff', 10, null],
  ['a.nef', 10, /raw/i],
  ['a.heic', 10, /HEIC/],
  ['a.mp4', 10, /video/i],
  ['Thumbs.db', 10, /JPEG, PNG/],
  ['a.jpg', 0, /empty/],
])('%s of %d bytes', (name, bytes, expected) => {
  const refusal = refusalOf(name, bytes);
  if (expected === null) expect(refusal).toBeNull();
  else expect(refusal).toMatch(expected);
});

// Truth: a quarter sent in 2 s leaves three times as long.
test('time left follows the pace so far', () => {
  expect(secondsLeft(25, 100, 2000)).toBe(6);
  expect(secondsLeft(0, 100, 2000)).toBeNull();
  expect(secondsLeft(25, 100, 100)).toBeNull();
});

// Source: RFC 9457: `detail` explains this occurrence, `title` the kind of problem.
test('a problem answer becomes its detail with its fields', () => {
  const error = problemOf(422, '{"title":"Invalid","detail":"Enter a tag.","fields":{"tag":"x"}}');
  expect(error).toMatchObject({ status: 422, message: 'Enter a tag.', fields: { tag: 'x' } });
  expect(problemOf(422, '{"title":"Invalid"}').message).toBe('Invalid');
  expect(problemOf(502, '<html>').message).toBe('Something went wrong on the server.');
});
