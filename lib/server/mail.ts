import 'server-only';
import { createHash } from 'node:crypto';
import nodemailer, { type Transporter } from 'nodemailer';
import type { Transaction } from 'sequelize';
import { db } from './db';
import { env } from './env';
import { enqueue, type Handler } from './queue';

export interface Mail {
  /** The same key is never sent twice: `invitation:<id>`. */
  idempotencyKey: string;
  shopId: string | null;
  to: string;
  subject: string;
  text: string;
}

/** Promises a mail inside the caller's transaction; a job sends it after the commit. */
export async function sendMail(transaction: Transaction, mail: Mail): Promise<void> {
  const { MailLog } = db();
  const [row, isNew] = await MailLog.findOrCreate({
    where: { idempotencyKey: mail.idempotencyKey },
    defaults: {
      idempotencyKey: mail.idempotencyKey,
      shopId: mail.shopId,
      recipient: mail.to,
      subject: mail.subject,
      text: mail.text,
    },
    transaction,
  });
  if (isNew) await enqueue(transaction, { kind: 'send-mail', subjectId: row.id });
}

const kept = globalThis as unknown as { mendlightMail?: Transporter };

function transport(): Transporter {
  kept.mendlightMail ??= nodemailer.createTransport(env().SMTP_URL);
  return kept.mendlightMail;
}

export const mailHandler: Handler = {
  async work(mailId) {
    const mail = await db().MailLog.findByPk(mailId, { rejectOnEmpty: true });
    if (mail.sentAt === null && mail.text !== null) {
      await transport().sendMail({
        from: env().MAIL_FROM,
        to: mail.recipient,
        subject: mail.subject,
        text: mail.text,
        messageId: messageId(mail.idempotencyKey),
      });
    }
    return async (transaction) => {
      await mail.update({ sentAt: mail.sentAt ?? new Date(), text: null }, { transaction });
    };
  },
  async failed() {
    // The row stays unsent; the job keeps the reason.
  },
};

/** The same for every attempt, so that a mail which went out just before a crash is recognised as the same one. */
function messageId(idempotencyKey: string): string {
  const name = createHash('sha256').update(idempotencyKey).digest('hex').slice(0, 32);
  return `<${name}@${new URL(env().APP_URL).hostname}>`;
}
