import 'server-only';
import { col, fn, Op, type Transaction } from 'sequelize';
import type { z } from 'zod';
import type { Actor, InvitationRow, MemberRow } from '@/lib/shared/api';
import { UserError } from '@/lib/shared/errors';
import type { changeMemberSchema } from '@/lib/shared/schemas';
import type { Invitation, Membership } from '@/models/people';
import { demand, inShop } from './access';
import { change, record } from './audit';
import { db } from './db';

/** The shop's members and the invitations that are still open. */
export async function listPeople(
  actor: Actor,
): Promise<{ members: MemberRow[]; invitations: InvitationRow[] }> {
  demand(actor, 'member.read');
  const [members, seen, invitations] = await Promise.all([
    db().Membership.findAll({
      where: inShop(actor),
      include: ['user'],
      order: [['createdAt', 'ASC']],
    }),
    lastSeen(actor),
    db().Invitation.findAll({
      where: inShop(actor, {
        acceptedAt: null,
        revokedAt: null,
        expiresAt: { [Op.gt]: new Date() },
      }),
      order: [['createdAt', 'ASC']],
    }),
  ]);
  return {
    members: members.map((member) => memberRow(member, seen.get(member.userId) ?? null)),
    invitations: invitations.map(invitationRow),
  };
}

export async function changeMember(
  actor: Actor,
  id: string,
  patch: z.output<typeof changeMemberSchema>,
): Promise<MemberRow> {
  demand(actor, 'member.manage');
  return change(actor, async (transaction) => {
    const member = await db().Membership.findOne({
      where: inShop(actor, { id }),
      include: ['user'],
      transaction,
    });
    if (!member) throw new UserError('notFound', 'No such member in this shop.');
    await member.update(patch, { transaction });
    await demandOwner(actor, transaction);
    if (!member.active) {
      await db().Session.update(
        { endedAt: new Date() },
        { where: inShop(actor, { userId: member.userId, endedAt: null }), transaction },
      );
    }
    await record(transaction, actor, 'member.change', ['Membership', id], patch);
    return memberRow(member, (await lastSeen(actor)).get(member.userId) ?? null);
  });
}

/** A shop keeps at least one owner; thrown inside the transaction, this undoes the change. */
async function demandOwner(actor: Actor, transaction: Transaction): Promise<void> {
  const owners = await db().Membership.count({
    where: inShop(actor, { role: 'owner', active: true }),
    transaction,
  });
  if (owners === 0) {
    throw new UserError('conflict', 'The shop needs an owner: make someone else owner first.');
  }
}

async function lastSeen(actor: Actor): Promise<Map<string, string>> {
  const rows = (await db().Session.findAll({
    attributes: ['userId', [fn('MAX', col('seenAt')), 'seenAt']],
    where: inShop(actor),
    group: ['userId'],
  })) as { userId: string; seenAt: Date }[];
  return new Map(rows.map((row) => [row.userId, new Date(row.seenAt).toISOString()]));
}

const memberRow = (member: Membership, lastSeenAt: string | null): MemberRow => ({
  id: member.id,
  name: member.user?.name ?? '',
  email: member.user?.email ?? '',
  role: member.role,
  active: member.active,
  lastSeenAt,
});

export const invitationRow = ({ id, email, role, expiresAt }: Invitation): InvitationRow => ({
  id,
  email,
  role,
  expiresAt: expiresAt.toISOString(),
});
