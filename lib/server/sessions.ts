import 'server-only';
import { Op } from 'sequelize';
import type { Actor, SessionRow } from '@/lib/shared/api';
import { UserError } from '@/lib/shared/errors';
import { inShop } from './access';
import { change, record } from './audit';
import { db } from './db';

/** The person's own open sessions, newest use first. */
export async function listSessions(actor: Actor): Promise<SessionRow[]> {
  const rows = await db().Session.findAll({
    where: inShop(actor, {
      userId: actor.userId,
      endedAt: null,
      expiresAt: { [Op.gt]: new Date() },
    }),
    order: [['seenAt', 'DESC']],
  });
  return rows.map((row) => ({
    id: row.id,
    userAgent: row.userAgent,
    startedAt: row.startedAt.toISOString(),
    seenAt: row.seenAt.toISOString(),
    current: row.id === actor.sessionId,
  }));
}

/** Ends one of the person's own sessions; its next request is refused. */
export async function endSession(actor: Actor, id: string): Promise<void> {
  await change(actor, async (transaction) => {
    const [ended] = await db().Session.update(
      { endedAt: new Date() },
      { where: inShop(actor, { id, userId: actor.userId, endedAt: null }), transaction },
    );
    if (ended !== 1) throw new UserError('notFound', 'No such open session of yours.');
    await record(transaction, actor, 'session.end', ['Session', id]);
  });
}
