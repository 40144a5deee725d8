import { afterAll, beforeAll, expect, test } from 'vitest';
import { GET } from '@/app/api/runs/[id]/events/route';
import { db } from '@/lib/server/db';
import { addShot } from '@/lib/server/shots';
import type { ShotRow } from '@/lib/shared/api';
import { makeHouse, plantAnalysis, requestOf } from './house';
import { tested, uploaded } from './journey';

let house: Awaited<ReturnType<typeof makeHouse>>;
beforeAll(async () => {
  house = await makeHouse();
});
afterAll(() => db().sequelize.close());

/** Reads a stream of events as a browser does (WHATWG HTML, 9.2.6): blocks end with an empty line. */
async function listen(runId: string) {
  const over = new AbortController();
  const request = await requestOf(house.refurbisher, 'GET', `/api/runs/${runId}/events`);
  const response = await GET(new Request(request, { signal: over.signal }), {
    params: Promise.resolve({ id: runId }),
  });
  const reader = response.body!.pipeThrough(new TextDecoderStream()).getReader();
  let rest = '';
  const waiting: { type: string; data: string }[] = [];
  const next = async (): Promise<{ type: string; data: string } | null> => {
    for (;;) {
      const event = waiting.shift();
      if (event) return event;
      const { done, value } = await reader.read();
      if (done) return null;
      const blocks = (rest + value).split('\n\n');
      rest = blocks.pop() ?? '';
      for (const block of blocks) {
        const type = block.match(/^event: (.*)$/m)?.[1];
        if (type) waiting.push({ type, data: block.match(/^data: (.*)$/m)?.[1] ?? '' });
      }
    }
  };
  const shot = async (id: string, state: ShotRow['state']): Promise<ShotRow> => {
    for (;;) {
      const event = await next();
      if (!event) throw new Error('The stream ended.');
      const row = JSON.parse(event.data) as ShotRow;
      if (event.type === 'shot' && row.id === id && row.state === state) return row;
    }
  };
  return { response, next, shot, close: () => over.abort() };
}

test('a run’s page hears of each shot as it comes, goes and is measured, until it leaves', async () => {
  const { runId, shotIds } = await tested(house.refurbisher, { shots: 1 });
  const events = await listen(runId);
  expect(events.response.headers.get('content-type')).toContain('text/event-stream');
  // What is there already comes first, so that nothing is missed between the page and the stream.
  expect((await events.shot(shotIds[0]!, 'done')).thumbnail).toContain('/pictures/thumb');
  expect((await events.next())?.type).toBe('run');

  const added = await addShot(house.refurbisher, runId, {
    sha256: await uploaded(house.refurbisher),
    name: 'IMG_9.JPG',
  });
  await events.shot(added.id, 'queued');
  const row = { state: 'analysing', progress: 0.5, changedAt: new Date() } as const;
  await db().Shot.update(row, { where: { id: added.id } });
  expect((await events.shot(added.id, 'analysing')).progress).toBe(0.5);
  await plantAnalysis(added.id);
  await events.shot(added.id, 'done');
  expect(await events.next()).toEqual({ type: 'run', data: JSON.stringify({ runId }) });

  events.close();
  expect(await events.next()).toBeNull();
});

test('another run’s shots are not heard', async () => {
  const [one, other] = [
    await tested(house.refurbisher, { shots: 1 }),
    await tested(house.refurbisher, { shots: 1 }),
  ];
  const events = await listen(one.runId);
  await db().Shot.update({ changedAt: new Date() }, { where: { id: other.shotIds[0]! } });
  await db().Shot.update({ changedAt: new Date() }, { where: { id: one.shotIds[0]! } });
  const heard = new Set<string>();
  for (let i = 0; i < 3; i++) {
    const event = await events.next();
    if (event?.type === 'shot') heard.add((JSON.parse(event.data) as ShotRow).id);
  }
  events.close();
  expect([...heard]).toEqual(one.shotIds);
});
