import 'server-only';
import type { z } from 'zod';
import { UserError } from '@/lib/shared/errors';
import type { forgottenSchema, newPasswordSchema } from '@/lib/shared/schemas';
import type { Membership } from '@/models/people';
import { change, record } from './audit';
import { db } from './db';
import { env } from './env';
import { limit } from './limits';
import { sendMail } from './mail';
import { hashPassword } from './passwords';
import { newToken, tokenHash } from './tokens';

const hour = 60 * 60 * 1000;

/** Mails a link to choose a new password. Says the same whether or not the address is known. */
export async function forgotPassword({ email }: z.output<typeof forgottenSchema>): Promise<void> {
  await limit(`password:${email}`, 5, 60);
  const user = await db().User.findOne({ where: { email } });
  const member = user && (await membershipOf(user.id));
  if (!user || !member) return;
  const token = newToken();
  await change(member, async (transaction) => {
    const row = await db().PasswordToken.create(
      {
        userId: user.id,
        tokenHash: tokenHash(token),
        expiresAt: new Date(Date.now() + hour),
      },
      { transaction },
    );
    await sendMail(transaction, {
      idempotencyKey: `password:${row.id}`,
      shopId: member.shopId,
      to: email,
      subject: 'Choose a new password',
      text: [
        'Someone, probably you, asked for a new password on Mendlight.',
        'Open this link within an hour to choose one:',
        `${env().APP_URL}/password/${token}`,
        'If it wasn’t you, leave this mail alone: nothing changes.',
      ].join('\n\n'),
    });
  });
}

/** Sets a new password by a mailed link, once, and ends every session of the person. */
export async function resetPassword(
  token: string,
  { password }: z.output<typeof newPasswordSchema>,
): Promise<void> {
  const found = await db().PasswordToken.findOne({
    where: { tokenHash: tokenHash(token), usedAt: null },
  });
  const member = found && (await membershipOf(found.userId));
  if (!found || !member || found.expiresAt < new Date()) throw usedUp();
  const { userId } = found;
  const passwordHash = await hashPassword(password);
  await change(member, async (transaction) => {
    const now = new Date();
    const [used] = await db().PasswordToken.update(
      { usedAt: now },
      { where: { id: found.id, usedAt: null }, transaction },
    );
    if (used !== 1) throw usedUp();
    await db().User.update({ passwordHash }, { where: { id: userId }, transaction });
    await db().Session.update({ endedAt: now }, { where: { userId, endedAt: null }, transaction });
    await record(transaction, member, 'password.set', ['User', userId]);
  });
}

const usedUp = () =>
  new UserError('notFound', 'This link is used up or older than an hour. Ask for a new one.');

const membershipOf = (userId: string): Promise<Membership | null> =>
  db().Membership.findOne({
    where: { userId, active: true },
    order: [['createdAt', 'ASC']],
  });
