import 'server-only';
import { Op } from 'sequelize';
import type { Actor } from '@/lib/shared/api';
import { demand, inShop } from './access';
import { db } from './db';
import { shotParts, shotRow } from './run-rows';
import { runById } from './runs';

const lookEvery = 500;
const beatEvery = 15_000;
/** A page that reconnects asks again who it is, so an ended session stops hearing after this long. */
const longest = 10 * 60_000;

/** Server-sent events of a run: `shot` with a ShotRow whenever one changes, `run` when results may have changed. */
export async function runEvents(
  actor: Actor,
  runId: string,
  signal: AbortSignal,
): Promise<Response> {
  demand(actor, 'run.read');
  await runById(actor, runId);
  const encoder = new TextEncoder();
  const stop = new AbortController();
  const over = AbortSignal.any([signal, stop.signal, AbortSignal.timeout(longest)]);
  const stream = new ReadableStream<Uint8Array>({
    async start(controller) {
      const send = (text: string) => controller.enqueue(encoder.encode(text));
      await follow(actor, runId, send, over).catch(console.error);
      if (!stop.signal.aborted) controller.close();
    },
    cancel: () => stop.abort(),
  });
  return new Response(stream, {
    headers: {
      'content-type': 'text/event-stream; charset=utf-8',
      'cache-control': 'no-store, no-transform',
      'x-accel-buffering': 'no',
    },
  });
}

async function follow(
  actor: Actor,
  runId: string,
  send: (text: string) => void,
  over: AbortSignal,
): Promise<void> {
  const known = new Map<string, number>();
  let since = new Date(0);
  let beat = Date.now();
  send(`retry: 2000\n\n`);
  while (!over.aborted) {
    const changed = await changedSince(actor, runId, since, known);
    if (over.aborted) return;
    for (const shot of changed) {
      send(`event: shot\ndata: ${JSON.stringify(shotRow(shot))}\n\n`);
      known.set(shot.id, shot.changedAt.getTime());
      if (shot.changedAt > since) since = shot.changedAt;
    }
    if (changed.some((shot) => shot.state === 'done' || shot.state === 'failed')) {
      send(`event: run\ndata: ${JSON.stringify({ runId })}\n\n`);
    }
    if (Date.now() - beat > beatEvery) {
      send(': still here\n\n');
      beat = Date.now();
    }
    await pause(lookEvery, over);
  }
}

/** A little overlap, since a transaction commits after the time that it wrote; what was sent already is left out. */
async function changedSince(actor: Actor, runId: string, since: Date, known: Map<string, number>) {
  const overlap = new Date(since.getTime() - 5000);
  const where = inShop(actor, { runId, changedAt: { [Op.gte]: overlap } });
  const times = await db().Shot.findAll({ attributes: ['id', 'changedAt'], where });
  const fresh = times.filter((shot) => known.get(shot.id) !== shot.changedAt.getTime());
  if (fresh.length === 0) return [];
  return db().Shot.findAll({
    where: inShop(actor, { id: { [Op.in]: fresh.map((shot) => shot.id) } }),
    include: shotParts,
    order: [['changedAt', 'ASC']],
  });
}

function pause(milliseconds: number, over: AbortSignal): Promise<void> {
  return new Promise((resolve) => {
    const done = () => {
      clearTimeout(timer);
      over.removeEventListener('abort', done);
      resolve();
    };
    const timer = setTimeout(done, milliseconds);
    over.addEventListener('abort', done);
  });
}
