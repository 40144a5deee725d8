import 'server-only';
import { createHash } from 'node:crypto';
import canonicalize from 'canonicalize';
import type { Transaction } from 'sequelize';
import type { AuditEvent } from '@/models/machinery';
import { db } from './db';
import { inTurn } from './turns';

/** Who acts, and in which shop. */
export interface Who {
  shopId: string;
  userId: string;
}

const beginning = '0'.repeat(64);
const attempts = 3;

/**
 * One change of a shop's facts, in a transaction that first locks the shop's row: changes of one shop come one after
 * another, so tags and the audit chain have no gaps. A deadlock with a worker is tried again.
 */
export async function change<T>(
  who: Pick<Who, 'shopId'>,
  work: (transaction: Transaction) => Promise<T>,
): Promise<T> {
  return inTurn(who.shopId, async () => {
    for (let attempt = 1; ; attempt++) {
      try {
        return await transact(who.shopId, work);
      } catch (error) {
        if (attempt === attempts || !isDeadlock(error)) throw error;
      }
    }
  });
}

function transact<T>(shopId: string, work: (transaction: Transaction) => Promise<T>): Promise<T> {
  return db().sequelize.transaction(async (transaction) => {
    await db().Shop.findByPk(shopId, { transaction, lock: transaction.LOCK.UPDATE });
    return work(transaction);
  });
}

/** Appends to the shop's audit chain; call it inside `change`. */
export async function record(
  transaction: Transaction,
  who: Who,
  action: string,
  subject: readonly [kind: string, id: string],
  detail: Record<string, unknown> = {},
): Promise<void> {
  const { AuditEvent } = db();
  const last = await AuditEvent.findOne({
    where: { shopId: who.shopId },
    order: [['position', 'DESC']],
    transaction,
  });
  const event = {
    shopId: who.shopId,
    position: (last?.position ?? 0) + 1,
    actorId: who.userId,
    action,
    subjectKind: subject[0],
    subjectId: subject[1],
    // As JSON gives it back, so that the hash can be checked from the stored row.
    detail: JSON.parse(JSON.stringify(detail)) as Record<string, unknown>,
    at: new Date(),
    previousHash: last?.hash ?? beginning,
  };
  await AuditEvent.create({ ...event, hash: hashOf(event) }, { transaction });
}

/** The position of the first row of a shop's chain that was altered, removed or put in, or null. */
export async function firstBreak(shopId: string): Promise<number | null> {
  const events = await db().AuditEvent.findAll({ where: { shopId }, order: [['position', 'ASC']] });
  let previousHash = beginning;
  for (const [index, event] of events.entries()) {
    const whole =
      event.position === index + 1 &&
      event.previousHash === previousHash &&
      event.hash === hashOf(event);
    if (!whole) return index + 1;
    previousHash = event.hash;
  }
  return null;
}

type Hashed = Omit<AuditEvent['_attributes'], 'id' | 'hash'>;

function hashOf(event: Hashed): string {
  const { shopId, position, actorId, action, subjectKind, subjectId, detail, previousHash } = event;
  const at = event.at.toISOString();
  const fields = {
    shopId,
    position,
    actorId,
    action,
    subjectKind,
    subjectId,
    detail,
    at,
    previousHash,
  };
  return createHash('sha256')
    .update(canonicalize(fields) ?? '')
    .digest('hex');
}

function isDeadlock(error: unknown): boolean {
  const cause = (error as { parent?: { errno?: number } }).parent;
  return cause?.errno === 1213 || cause?.errno === 1020;
}
