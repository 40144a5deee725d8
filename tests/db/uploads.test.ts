import { randomBytes } from 'node:crypto';
import { readFileSync } from 'node:fs';
import sharp from 'sharp';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { HEAD, PUT } from '@/app/api/uploads/[sha256]/route';
import { db } from '@/lib/server/db';
import { createRun } from '@/lib/server/runs';
import { addShot, getShot, reanalyse } from '@/lib/server/shots';
import { getBytes, head, originalKey } from '@/lib/server/storage';
import { largestOriginal } from '@/lib/server/uploads';
import type { Actor } from '@/lib/shared/api';
import { cookieOf, makeHouse, photograph, sha256Of } from './house';
import { sent, takenIn, tested, uploaded } from './journey';

let house: Awaited<ReturnType<typeof makeHouse>>;
beforeAll(async () => {
  house = await makeHouse();
});
afterAll(() => db().sequelize.close());

type Body = NonNullable<RequestInit['body']>;

async function put(actor: Actor, sha256: string, body: Body, headers: Record<string, string> = {}) {
  const request = new Request(`http://localhost/api/uploads/${sha256}`, {
    method: 'PUT',
    body,
    headers: { cookie: await cookieOf(actor), ...headers },
    ...(body instanceof ReadableStream ? { duplex: 'half' } : {}),
  } as RequestInit);
  const response = await PUT(request, { params: Promise.resolve({ sha256 }) });
  return { status: response.status, body: await response.json() };
}

async function headStatus(actor: Actor, sha256: string) {
  const request = new Request('http://localhost/', {
    method: 'HEAD',
    headers: { cookie: await cookieOf(actor) },
  });
  return (await HEAD(request, { params: Promise.resolve({ sha256 }) })).status;
}

/** Nothing under the key, and no row. */
async function expectNoDebris(actor: Actor, sha256: string) {
  expect(await head(originalKey(actor.shopId, sha256))).toBeNull();
  expect(await headStatus(actor, sha256)).toBe(404);
}

function streamOf(bytes: Uint8Array, chunk: number, breakAt = Number.POSITIVE_INFINITY) {
  let sentBytes = 0;
  return new ReadableStream<Uint8Array>({
    pull(controller) {
      if (sentBytes >= breakAt) return controller.error(new Error('connection reset'));
      if (sentBytes >= bytes.length) return controller.close();
      controller.enqueue(bytes.slice(sentBytes, sentBytes + chunk));
      sentBytes += chunk;
    },
  });
}

describe('an upload', () => {
  test('arrives byte for byte under its hash, and a second time changes nothing', async () => {
    const bytes = await photograph();
    const sha256 = sha256Of(bytes);
    expect(await headStatus(house.refurbisher, sha256)).toBe(404);
    const first = await put(house.refurbisher, sha256, bytes);
    expect(first).toEqual({
      status: 201,
      body: { sha256, bytes: bytes.length, mediaType: 'image/jpeg' },
    });
    expect(sha256Of(await getBytes(originalKey(house.shop.id, sha256)))).toBe(sha256);
    expect(await headStatus(house.refurbisher, sha256)).toBe(200);
    await put(house.owner, sha256, bytes);
    expect(await db().Original.count({ where: { sha256 } })).toBe(1);
  });

  // stack.md: proxies cut bodies at 10 MB without a word, and fake stores keep checksum framing (46 bytes) of streamed parts.
  test('of 17 MB in parts arrives whole and unframed', async () => {
    const noise = randomBytes(17 * 1024 * 1024);
    const bytes = new Uint8Array([0xff, 0xd8, 0xff, ...noise.subarray(3, 64)]);
    const whole = new Uint8Array(noise);
    whole.set(bytes);
    const sha256 = sha256Of(whole);
    const { status, body } = await put(house.refurbisher, sha256, streamOf(whole, 65_536));
    expect([status, body.bytes]).toEqual([201, whole.length]);
    expect(await head(originalKey(house.shop.id, sha256))).toEqual({ bytes: whole.length });
  });

  test('is known only in the shop that has it', async () => {
    const other = await makeHouse();
    const sha256 = await uploaded(house.refurbisher);
    expect(await headStatus(other.refurbisher, sha256)).toBe(404);
  });

  test.each(['jpeg', 'png', 'tiff', 'webp', 'avif'] as const)(
    'of %s is taken for what its bytes are',
    async (kind) => {
      const raw = { width: 32, height: 32, channels: 3 as const };
      const bytes = new Uint8Array(
        await sharp(randomBytes(32 * 32 * 3), { raw })
          .toFormat(kind)
          .toBuffer(),
      );
      const { status, body } = await put(house.refurbisher, sha256Of(bytes), bytes);
      expect([status, body.mediaType]).toEqual([201, `image/${kind}`]);
    },
  );
});

describe('what can’t be taken gets a sentence, and leaves nothing behind', () => {
  test('bytes that are not those announced', async () => {
    const announced = sha256Of(randomBytes(8));
    const { status, body } = await put(house.refurbisher, announced, await photograph());
    expect([status, body.detail]).toEqual([
      422,
      expect.stringContaining('not those that were announced'),
    ]);
    await expectNoDebris(house.refurbisher, announced);
  });

  test('a body cut short of its Content-Length, as a proxy cuts it', async () => {
    const bytes = await photograph();
    const half = bytes.slice(0, bytes.length / 2);
    const sha256 = sha256Of(bytes);
    const headers = { 'content-length': String(bytes.length) };
    const { status, body } = await put(house.refurbisher, sha256, half, headers);
    expect([status, body.detail]).toEqual([422, expect.stringMatching(/of \d+ bytes arrived/)]);
    await expectNoDebris(house.refurbisher, sha256);
  });

  test('a connection that breaks after two parts', async () => {
    const bytes = new Uint8Array(randomBytes(16 * 1024 * 1024));
    bytes.set([0xff, 0xd8, 0xff]);
    const sha256 = sha256Of(bytes);
    const broken = streamOf(bytes, 1_048_576, 12 * 1024 * 1024);
    const { status, body } = await put(house.refurbisher, sha256, broken);
    expect([status, body.detail]).toEqual([422, 'The upload broke off. Send the file again.']);
    await expectNoDebris(house.refurbisher, sha256);
  });

  test('more than 100 MB, told from the header before a byte is read', async () => {
    const headers = { 'content-length': String(largestOriginal + 1) };
    const { status } = await put(
      house.refurbisher,
      sha256Of(randomBytes(8)),
      await photograph(),
      headers,
    );
    expect(status).toBe(413);
  });

  test.each([
    ['an empty file', new Uint8Array(), 422, 'empty'],
    [
      'a text',
      new TextEncoder().encode('not a picture, but long enough to look at'),
      415,
      'JPEG, PNG',
    ],
    ['three bytes', new Uint8Array([1, 2, 3]), 415, 'JPEG, PNG'],
    // ISO base media file format (ISO/IEC 14496-12): size, 'ftyp', major brand; brand heic as HEIF files carry it.
    [
      'a HEIC picture',
      new TextEncoder().encode('\0\0\0\x18ftypheic\0\0\0\0mif1heic..........'),
      415,
      'HEIC',
    ],
    [
      'a film',
      new TextEncoder().encode('\0\0\0\x18ftypqt  \0\0\0\0qt  ..............'),
      415,
      'film',
    ],
    ['a script named a picture', new Uint8Array(readFileSync('package.json')), 415, 'JPEG, PNG'],
  ])('%s', async (_, bytes, expected, words) => {
    const sha256 = sha256Of(bytes);
    const { status, body } = await put(house.refurbisher, sha256, bytes);
    expect([status, body.detail]).toEqual([expected, expect.stringContaining(words)]);
    await expectNoDebris(house.refurbisher, sha256);
  });

  test('an address that is no hash', async () => {
    const { status } = await put(house.refurbisher, '../../etc/passwd', await photograph());
    expect(status).toBe(422);
  });
});

describe('a shot', () => {
  test('is made together with its job, once a run however often it is added', async () => {
    const tag = await takenIn(house.refurbisher);
    const run = await createRun(house.refurbisher, tag, { title: 'Before', phase: 'before' });
    const sha256 = await uploaded(house.refurbisher);
    const add = () => addShot(house.refurbisher, run.id, { sha256, name: 'DCIM\\100\\IMG_7.JPG' });
    const [first, again] = await Promise.all([add(), add()]);
    expect(first.id).toBe(again.id);
    expect(first).toMatchObject({ name: 'IMG_7.JPG', state: 'queued', sha256, thumbnail: null });
    const jobs = await db().Job.findAll({ where: { subjectId: first.id } });
    expect(jobs.map((job) => [job.kind, job.state])).toEqual([['analyse-shot', 'pending']]);
  });

  test('needs its original in this shop', async () => {
    const other = await makeHouse();
    const foreign = await uploaded(other.refurbisher);
    const { runId } = await tested(house.refurbisher, { shots: 0 });
    const add = addShot(house.refurbisher, runId, { sha256: foreign, name: 'a.jpg' });
    await expect(add).rejects.toMatchObject({
      code: 'notFound',
      message: 'Upload the file first.',
    });
  });

  test('can’t be added while a grade is awaited', async () => {
    const { runId } = await sent(house.refurbisher);
    const late = addShot(house.refurbisher, runId, {
      sha256: await uploaded(house.refurbisher),
      name: 'a.jpg',
    });
    await expect(late).rejects.toMatchObject({ code: 'conflict' });
  });

  test('shows its analysis, its neighbours and its versions', async () => {
    const { shotIds, runId } = await tested(house.refurbisher, { shots: 3 });
    const shot = await getShot(house.grader, shotIds[1]!);
    expect(shot).toMatchObject({ runId, previous: shotIds[0], next: shotIds[2], width: 2000 });
    expect(shot.analysis?.crops.map((crop) => crop.station)).toEqual(['C', 'SE', 'NW']);
    expect(shot.analysis?.crops[0]?.url).toBe(`/api/shots/${shot.id}/pictures/crop-C`);
    expect(shot.analyses).toHaveLength(1);
  });

  test('is queued anew without losing what was measured', async () => {
    const { shotIds } = await tested(house.refurbisher, { shots: 1 });
    const row = await reanalyse(house.grader, shotIds[0]!, { kind: 'target' });
    expect(row.state).toBe('queued');
    expect((await getShot(house.grader, shotIds[0]!)).analyses).toHaveLength(1);
    const open = await db().Job.count({ where: { subjectId: shotIds[0]!, state: 'pending' } });
    expect(open).toBe(1);
  });
});
