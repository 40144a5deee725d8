import 'server-only';
import { Op, QueryTypes, Transaction } from 'sequelize';
import { db } from './db';

export type JobKind = 'analyse-shot' | 'send-mail';

/** A job that this process works on: `holder` is its fence, a new one each time the job is claimed. */
export interface Claim {
  readonly id: string;
  readonly kind: JobKind;
  readonly subjectId: string;
  readonly attempts: number;
  readonly holder: string;
}

/** How a kind of job is done. */
export interface Handler {
  /** Does the work and returns its writes, which are carried out in one transaction together with settling the job. */
  work(
    subjectId: string,
    signal: AbortSignal,
  ): Promise<(transaction: Transaction) => Promise<void>>;
  /** Called once when the last attempt has failed. */
  failed(subjectId: string, error: unknown): Promise<void>;
}

const mostAttempts = 5;

const wakers = globalThis as unknown as { mendlightWake?: (kind: JobKind) => void };

/** Lets the dispatcher of this process know that work waits; other processes find it by looking. */
export function onEnqueue(wake: (kind: JobKind) => void): void {
  wakers.mendlightWake = wake;
}

/** Adds a job inside the caller's transaction, unless the same one waits already. */
export async function enqueue(
  transaction: Transaction,
  job: { kind: JobKind; subjectId: string; runAfter?: Date },
): Promise<void> {
  await db().Job.bulkCreate([{ ...job, pendingKey: `${job.kind}:${job.subjectId}` }], {
    transaction,
    updateOnDuplicate: ['pendingKey'],
  });
  transaction.afterCommit(() => wakers.mendlightWake?.(job.kind));
}

/** The next job that is due, or one whose holder gave no sign of life until its lease ran out. */
export async function claim(
  kind: JobKind,
  holder: string,
  leaseMs: number,
  now: Date = new Date(),
): Promise<Claim | null> {
  const { Job, sequelize } = db();
  const isolationLevel = Transaction.ISOLATION_LEVELS.READ_COMMITTED;
  return sequelize.transaction({ isolationLevel }, async (transaction) => {
    const id =
      (await lockOne(transaction, 'pending', 'runAfter', kind, now)) ??
      (await lockOne(transaction, 'running', 'leaseUntil', kind, now));
    if (id === null) return null;
    const job = await Job.findByPk(id, { transaction, rejectOnEmpty: true });
    await job.update(
      {
        state: 'running',
        attempts: job.attempts + 1,
        leasedBy: holder,
        leaseUntil: new Date(now.getTime() + leaseMs),
        pendingKey: null,
      },
      { transaction },
    );
    return { id, kind, subjectId: job.subjectId, attempts: job.attempts, holder };
  });
}

/** Sequelize drops `skipLocked` for MariaDB without a word, so the statement is written out. */
async function lockOne(
  transaction: Transaction,
  state: 'pending' | 'running',
  column: 'runAfter' | 'leaseUntil',
  kind: JobKind,
  now: Date,
): Promise<string | null> {
  const rows = await db().sequelize.query<{ id: string }>(
    `SELECT id FROM jobs WHERE kind = ? AND state = ? AND ${column} <= ?
     ORDER BY ${column} LIMIT 1 FOR UPDATE SKIP LOCKED`,
    { replacements: [kind, state, now], transaction, type: QueryTypes.SELECT },
  );
  return rows[0]?.id ?? null;
}

/** Says that the holder is alive; false when the job has been given to another. */
export async function extend(held: Claim, leaseMs: number): Promise<boolean> {
  const [count] = await db().Job.update(
    { leaseUntil: new Date(Date.now() + leaseMs) },
    { where: mine(held) },
  );
  return count === 1;
}

/** Settles the job in the transaction that writes its results; throws, and so undoes them, when the lease was lost. */
export async function complete(transaction: Transaction, held: Claim): Promise<void> {
  const [count] = await db().Job.update(
    { state: 'done', settledAt: new Date(), leaseUntil: null, error: null },
    { where: mine(held), transaction },
  );
  if (count !== 1) throw new Error(`Job ${held.id} was given to another worker.`);
}

/** Gives the job back for another attempt, later each time. Returns false when it was the last one: then the job has failed. */
export async function giveBack(held: Claim, error: unknown): Promise<boolean> {
  const again = held.attempts < mostAttempts;
  const waitMs = 1000 * 4 ** (held.attempts - 1);
  await db().Job.update(
    {
      state: again ? 'pending' : 'failed',
      runAfter: new Date(Date.now() + waitMs),
      leaseUntil: null,
      leasedBy: null,
      settledAt: again ? null : new Date(),
      error: error instanceof Error ? (error.stack ?? error.message) : String(error),
    },
    { where: mine(held) },
  );
  return again;
}

/** Gives back a job that was not finished because the process ends; the attempt does not count. */
export async function release(held: Claim): Promise<void> {
  await db().Job.update(
    { state: 'pending', attempts: held.attempts - 1, leaseUntil: null, leasedBy: null },
    { where: mine(held) },
  );
}

/** A job that killed its holder again and again is not tried for ever. */
export function isWornOut(held: Claim): boolean {
  return held.attempts > mostAttempts;
}

/** How many jobs of a kind are not settled yet. */
export async function countOpen(kind: JobKind): Promise<number> {
  return db().Job.count({ where: { kind, state: { [Op.in]: ['pending', 'running'] } } });
}

function mine(held: Claim) {
  return { id: held.id, state: 'running', leasedBy: held.holder };
}
