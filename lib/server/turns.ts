import 'server-only';

/** Changes at a time in this process: half the connection pool, so that what they read finds a connection. */
const most = 4;
let running = 0;
const waiting: (() => void)[] = [];
const tails = new Map<string, Promise<unknown>>();

/**
 * Runs work of the same key one after another, and of all keys a few at a time. The database's row lock already keeps
 * one shop's changes apart; waiting here instead keeps the waiters from holding every connection.
 */
export function inTurn<T>(key: string, work: () => Promise<T>): Promise<T> {
  const before = tails.get(key) ?? Promise.resolve();
  const turn = before.then(() => withSlot(work));
  const tail = turn.then(ignore, ignore).then(() => {
    if (tails.get(key) === tail) tails.delete(key);
  });
  tails.set(key, tail);
  return turn;
}

const ignore = () => undefined;

async function withSlot<T>(work: () => Promise<T>): Promise<T> {
  if (running < most) running++;
  else await new Promise<void>((resolve) => waiting.push(resolve));
  try {
    return await work();
  } finally {
    const next = waiting.shift();
    if (next) next();
    else running--;
  }
}
