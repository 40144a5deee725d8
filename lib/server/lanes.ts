import 'server-only';
import { randomUUID } from 'node:crypto';
import { hostname } from 'node:os';
import { db } from './db';
import {
  type Claim,
  claim,
  complete,
  extend,
  giveBack,
  type Handler,
  isWornOut,
  type JobKind,
  onEnqueue,
  release,
} from './queue';

export interface Dispatcher {
  /** Claims nothing new; work in hand is finished or given back, whichever is quicker. */
  stop(): Promise<void>;
}

interface Options {
  leaseMs: number;
  /** How often to look for work that other processes have added. */
  lookMs: number;
}

const defaults: Options = { leaseMs: 30_000, lookMs: 1000 };

export interface Lane {
  kind: JobKind;
  handler: Handler;
  width: number;
}

/** Works on the queue in this process until stopped; each lane does as many jobs at a time as it is wide. */
export function runLanes(lanes: Lane[], options: Options = defaults): Dispatcher {
  const stopping = new AbortController();
  const sleepers = new Map<JobKind, Set<() => void>>();
  onEnqueue((kind) => {
    for (const wake of sleepers.get(kind) ?? []) wake();
  });
  const sleep = (kind: JobKind) =>
    new Promise<void>((resolve) => {
      const here = sleepers.get(kind) ?? new Set();
      sleepers.set(kind, here);
      const wake = () => {
        clearTimeout(timer);
        here.delete(wake);
        stopping.signal.removeEventListener('abort', wake);
        resolve();
      };
      const timer = setTimeout(wake, options.lookMs);
      here.add(wake);
      stopping.signal.addEventListener('abort', wake);
    });

  const follow = async (lane: Lane) => {
    while (!stopping.signal.aborted) {
      const held = await nextJob(lane.kind, options.leaseMs);
      if (held) await perform(held, lane.handler, options.leaseMs, stopping.signal);
      else await sleep(lane.kind);
    }
  };
  const followers = lanes.flatMap((lane) => Array.from({ length: lane.width }, () => follow(lane)));
  return {
    stop: async () => {
      stopping.abort();
      await Promise.all(followers);
    },
  };
}

async function nextJob(kind: JobKind, leaseMs: number): Promise<Claim | null> {
  try {
    return await claim(kind, `${hostname()}:${process.pid}:${randomUUID()}`.slice(-80), leaseMs);
  } catch (error) {
    // The database may be away for a moment; the next look tries again.
    console.error('The queue could not be read:', error);
    return null;
  }
}

async function perform(
  held: Claim,
  handler: Handler,
  leaseMs: number,
  stopping: AbortSignal,
): Promise<void> {
  const lost = new AbortController();
  const heartbeat = setInterval(() => {
    extend(held, leaseMs).then(
      (alive) => alive || lost.abort(),
      (error) => console.error(`The lease of job ${held.id} could not be extended:`, error),
    );
  }, leaseMs / 3);
  try {
    if (isWornOut(held)) throw new Error('Every process that worked on this job has died.');
    const write = await handler.work(held.subjectId, AbortSignal.any([lost.signal, stopping]));
    await db().sequelize.transaction(async (transaction) => {
      await complete(transaction, held);
      await write(transaction);
    });
  } catch (error) {
    if (lost.signal.aborted) return;
    if (stopping.aborted) await release(held);
    else await giveUp(held, handler, error);
  } finally {
    clearInterval(heartbeat);
  }
}

async function giveUp(held: Claim, handler: Handler, error: unknown): Promise<void> {
  console.error(`Job ${held.kind} ${held.subjectId}, attempt ${held.attempts}:`, error);
  try {
    const again = await giveBack(held, error);
    if (!again) await handler.failed(held.subjectId, error);
  } catch (second) {
    // Its lease will run out, and another attempt will settle it.
    console.error(`Job ${held.id} could not be given back:`, second);
  }
}
