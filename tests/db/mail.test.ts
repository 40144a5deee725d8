import { afterAll, expect, inject, test } from 'vitest';
import { keptMails } from '@/fixtures/fakes/mail';
import { db } from '@/lib/server/db';
import { runLanes } from '@/lib/server/lanes';
import { mailHandler, sendMail } from '@/lib/server/mail';
import { newId } from '@/models/id';

const folder = inject('mailFolder');
afterAll(async () => {
  await db().sequelize.close();
});

const mail = (key: string) => ({
  idempotencyKey: key,
  shopId: null,
  to: 'mira@example.org',
  subject: 'Grüße aus der Werkstatt',
  text: 'Open https://example.org/invitation/with-a-long-token-0123456789abcdefghijklmnopqrstuvwxyz-0123456789 – it works once.\n',
});

async function sendAll(): Promise<void> {
  const lanes = runLanes([{ kind: 'send-mail', handler: mailHandler, width: 1 }], {
    leaseMs: 5000,
    lookMs: 20,
  });
  const open = () =>
    db().Job.count({ where: { kind: 'send-mail', state: ['pending', 'running'] } });
  while ((await open()) > 0) await new Promise((resolve) => setTimeout(resolve, 20));
  await lanes.stop();
}

test('a promised mail leaves once, whole, and its text is forgotten afterwards', async () => {
  const key = `test:${newId()}`;
  for (let i = 0; i < 2; i++) {
    await db().sequelize.transaction((t) => sendMail(t, mail(key)));
    await sendAll();
  }
  const row = await db().MailLog.findOne({ where: { idempotencyKey: key }, rejectOnEmpty: true });
  expect(row.sentAt).toBeInstanceOf(Date);
  expect(row.text).toBeNull();
  const got = keptMails(folder).filter(({ to }) => to === 'mira@example.org');
  expect(got).toHaveLength(1);
  expect(got[0]?.subject).toBe(mail(key).subject);
  expect(got[0]?.text.trim()).toBe(mail(key).text.trim());
});

test('a mail of a transaction that failed never leaves', async () => {
  const key = `test:${newId()}`;
  const before = keptMails(folder).length;
  const failing = db().sequelize.transaction(async (t) => {
    await sendMail(t, mail(key));
    throw new Error('rolled back');
  });
  await expect(failing).rejects.toThrow('rolled back');
  await sendAll();
  expect(keptMails(folder)).toHaveLength(before);
});

test('every attempt at one mail carries the same Message-ID, so that a receiver sees a repeat as one', async () => {
  const key = `test:${newId()}`;
  await db().sequelize.transaction((t) => sendMail(t, mail(key)));
  const row = await db().MailLog.findOne({ where: { idempotencyKey: key }, rejectOnEmpty: true });
  // Sent, but the process dies before the writes: the next attempt sends again.
  await mailHandler.work(row.id, new AbortController().signal);
  await sendAll();
  const [last, first] = keptMails(folder).slice(-2).reverse();
  expect(first?.messageId).toMatch(/^<[0-9a-f]{32}@/);
  expect(last?.messageId).toBe(first?.messageId);
});
