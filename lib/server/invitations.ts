import 'server-only';
import type { Transaction } from 'sequelize';
import type { z } from 'zod';
import type { Actor, InvitationRow } from '@/lib/shared/api';
import { UserError } from '@/lib/shared/errors';
import type { acceptInvitationSchema, inviteSchema } from '@/lib/shared/schemas';
import type { Role } from '@/lib/shared/words';
import type { Invitation, User } from '@/models/people';
import { demand, inShop } from './access';
import { change, record } from './audit';
import { db } from './db';
import { env } from './env';
import { limit } from './limits';
import { sendMail } from './mail';
import { invitationRow } from './members';
import { hashPassword, verifyPassword } from './passwords';
import { newToken, tokenHash } from './tokens';

const daysOpen = 7;

/** Invites someone by mail. An earlier open invitation to the same address ends. */
export async function invite(
  actor: Actor,
  { email, role }: z.output<typeof inviteSchema>,
): Promise<InvitationRow> {
  demand(actor, 'member.manage');
  const { Invitation } = db();
  const token = newToken();
  return change(actor, async (transaction) => {
    if (await isMember(actor, email, transaction)) {
      throw new UserError('conflict', `${email} is a member already.`, {
        email: 'Already a member.',
      });
    }
    await Invitation.update(
      { revokedAt: new Date() },
      { where: inShop(actor, { email, acceptedAt: null, revokedAt: null }), transaction },
    );
    const row = await Invitation.create(
      {
        ...inShop(actor, { email, role }),
        tokenHash: tokenHash(token),
        invitedById: actor.userId,
        expiresAt: new Date(Date.now() + daysOpen * 24 * 60 * 60 * 1000),
      },
      { transaction },
    );
    await sendMail(transaction, {
      idempotencyKey: `invitation:${row.id}`,
      shopId: actor.shopId,
      to: email,
      subject: `Join ${actor.shopName} on Mendlight`,
      text: [
        `${actor.name} invites you to join ${actor.shopName} as ${role}.`,
        `Open this link within ${daysOpen} days and choose a password:`,
        `${env().APP_URL}/invitations/${token}`,
      ].join('\n\n'),
    });
    await record(transaction, actor, 'member.invite', ['Invitation', row.id], { email, role });
    return invitationRow(row);
  });
}

async function isMember(actor: Actor, email: string, transaction: Transaction): Promise<boolean> {
  const user = await db().User.findOne({ where: { email }, transaction });
  const where = user && inShop(actor, { userId: user.id, active: true });
  return where ? (await db().Membership.count({ where, transaction })) > 0 : false;
}

/** What the page behind an invitation's link shows. */
export async function invitationOf(
  token: string,
): Promise<{ shopName: string; email: string; role: Role; hasAccount: boolean }> {
  const invitation = await openInvitation(token);
  const { email, role, shop } = invitation;
  const hasAccount = (await db().User.count({ where: { email } })) > 0;
  return { shopName: shop?.name ?? '', email, role, hasAccount };
}

/** Makes the invited person a member. Someone who has an account already proves it with its password. */
export async function acceptInvitation(
  token: string,
  input: z.output<typeof acceptInvitationSchema>,
): Promise<{ email: string }> {
  const { shopId } = await openInvitation(token);
  await limit(`invitation:${tokenHash(token)}`, 10, 15);
  return change({ shopId }, async (transaction) => {
    const invitation = await openInvitation(token, transaction);
    const { email, role } = invitation;
    const user = await personOf(email, input, transaction);
    const member = { shopId, userId: user.id };
    const [row] = await db().Membership.findOrCreate({
      where: member,
      defaults: { ...member, role },
      transaction,
    });
    await row.update({ role, active: true }, { transaction });
    await invitation.update({ acceptedAt: new Date() }, { transaction });
    await record(transaction, member, 'member.join', ['Membership', row.id], { role });
    return { email };
  });
}

async function personOf(
  email: string,
  { name, password }: z.output<typeof acceptInvitationSchema>,
  transaction: Transaction,
): Promise<User> {
  const known = await db().User.findOne({ where: { email }, transaction });
  if (!known) {
    const passwordHash = await hashPassword(password);
    return db().User.create({ email, name, passwordHash }, { transaction });
  }
  if (!(await verifyPassword(known.passwordHash, password))) {
    throw new UserError('invalid', 'You have an account already: enter its password.', {
      password: 'This is not your account’s password.',
    });
  }
  return known;
}

async function openInvitation(token: string, transaction?: Transaction): Promise<Invitation> {
  const invitation = await db().Invitation.findOne({
    where: { tokenHash: tokenHash(token), acceptedAt: null, revokedAt: null },
    include: ['shop'],
    ...(transaction && { transaction }),
  });
  if (!invitation || invitation.expiresAt < new Date()) {
    throw new UserError('notFound', 'This invitation is used up or has ended. Ask for a new one.');
  }
  return invitation;
}
