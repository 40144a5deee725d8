import { afterAll, beforeAll, describe, expect, inject, test } from 'vitest';
import { keptMails } from '@/fixtures/fakes/mail';
import { db } from '@/lib/server/db';
import { acceptInvitation, invitationOf, invite } from '@/lib/server/invitations';
import { runLanes } from '@/lib/server/lanes';
import { mailHandler } from '@/lib/server/mail';
import { changeMember, listPeople } from '@/lib/server/members';
import { forgotPassword, resetPassword } from '@/lib/server/password-reset';
import { actorOf, signIn } from '@/lib/server/session';
import { endSession, listSessions } from '@/lib/server/sessions';
import { cookieOf, makeHouse, makeMember, password } from './house';

let house: Awaited<ReturnType<typeof makeHouse>>;
beforeAll(async () => {
  house = await makeHouse();
});
afterAll(() => db().sequelize.close());

/** Sends what waits, and gives the token at the end of the newest mail's link. */
async function mailedToken(to: string): Promise<string> {
  const lanes = runLanes([{ kind: 'send-mail', handler: mailHandler, width: 1 }], {
    leaseMs: 5000,
    lookMs: 20,
  });
  const open = () =>
    db().Job.count({ where: { kind: 'send-mail', state: ['pending', 'running'] } });
  while ((await open()) > 0) await new Promise((resolve) => setTimeout(resolve, 20));
  await lanes.stop();
  const mail = keptMails(inject('mailFolder'))
    .filter((one) => one.to === to)
    .at(-1);
  return mail?.text.match(/\/(?:invitations|password)\/([\w-]{43})/)?.[1] ?? '';
}

describe('signing in', () => {
  test('opens a session that every request can be traced to, until it is ended', async () => {
    const { sessionId } = await signIn(
      { email: house.grader.email.toUpperCase(), password },
      'A browser',
    );
    const actor = { ...house.grader, sessionId };
    const cookie = await cookieOf(actor);
    expect(await actorOf(`theme=dark; ${cookie}`)).toEqual(actor);
    const sessions = await listSessions(actor);
    expect(sessions.find((row) => row.current)).toMatchObject({
      id: sessionId,
      userAgent: 'A browser',
    });
    await endSession(house.grader, sessionId);
    expect(await actorOf(cookie)).toBeNull();
  });

  test.each([
    ['a wrong password', () => ({ email: house.owner.email, password: 'not this one' })],
    ['an unknown address', () => ({ email: 'nobody@example.org', password })],
  ])('with %s says the same thing', async (_, credentials) => {
    await expect(signIn(credentials(), '')).rejects.toMatchObject({
      code: 'unauthorized',
      message: 'The e-mail address or the password is wrong.',
    });
  });

  test('is refused after ten wrong passwords, the right one included', async () => {
    const { email } = await makeMember(house.shop, 'grader');
    for (let i = 0; i < 10; i++) await signIn({ email, password: 'wrong' }, '').catch(() => null);
    await expect(signIn({ email, password }, '')).rejects.toMatchObject({ code: 'tooMany' });
  });

  test('a cookie that was made up, altered or has run out is nobody’s', async () => {
    const cookie = await cookieOf(house.owner);
    expect(await actorOf(null)).toBeNull();
    expect(await actorOf('mendlight=nonsense')).toBeNull();
    expect(await actorOf(`${cookie.slice(0, -4)}AAAA`)).toBeNull();
    const member = await makeMember(house.shop, 'owner');
    await db().Session.update(
      { expiresAt: new Date(Date.now() - 1) },
      { where: { id: member.sessionId } },
    );
    expect(await actorOf(await cookieOf(member))).toBeNull();
  });

  test('nobody ends another person’s session', async () => {
    await expect(endSession(house.grader, house.owner.sessionId)).rejects.toMatchObject({
      code: 'notFound',
    });
  });
});

describe('members', () => {
  test('a change of role holds at the next request', async () => {
    const { owner, grader, shop } = await makeHouse();
    const row = await db().Membership.findOne({
      where: { userId: grader.userId },
      rejectOnEmpty: true,
    });
    await changeMember(owner, row.id, { role: 'refurbisher' });
    expect(await actorOf(await cookieOf(grader))).toMatchObject({
      role: 'refurbisher',
      shopId: shop.id,
    });
  });

  test('someone deactivated is signed out at once and can’t come back', async () => {
    const { owner, grader } = await makeHouse();
    const row = await db().Membership.findOne({
      where: { userId: grader.userId },
      rejectOnEmpty: true,
    });
    await changeMember(owner, row.id, { active: false });
    expect(await actorOf(await cookieOf(grader))).toBeNull();
    await expect(signIn({ email: grader.email, password }, '')).rejects.toMatchObject({
      code: 'unauthorized',
    });
  });

  test('a shop keeps an owner', async () => {
    const { owner } = await makeHouse();
    const row = await db().Membership.findOne({
      where: { userId: owner.userId },
      rejectOnEmpty: true,
    });
    for (const patch of [{ active: false }, { role: 'grader' as const }]) {
      await expect(changeMember(owner, row.id, patch)).rejects.toMatchObject({ code: 'conflict' });
    }
    expect((await actorOf(await cookieOf(owner)))?.role).toBe('owner');
  });

  test('another shop’s member can’t be changed or seen', async () => {
    const other = await makeHouse();
    const row = await db().Membership.findOne({
      where: { userId: house.grader.userId },
      rejectOnEmpty: true,
    });
    await expect(changeMember(other.owner, row.id, { active: false })).rejects.toMatchObject({
      code: 'notFound',
    });
    const { members } = await listPeople(other.owner);
    expect(members.map((member) => member.email)).not.toContain(house.grader.email);
  });
});

describe('an invitation', () => {
  test('comes by mail, is taken up once, and makes a member', async () => {
    const email = 'new.person@example.org';
    const row = await invite(house.owner, { email, role: 'refurbisher' });
    const token = await mailedToken(email);
    expect(await invitationOf(token)).toEqual({
      shopName: house.shop.name,
      email,
      role: 'refurbisher',
      hasAccount: false,
    });
    expect((await listPeople(house.owner)).invitations.map(({ id }) => id)).toContain(row.id);
    const input = { name: 'New Person', password: 'a password of mine' };
    await acceptInvitation(token, input);
    await expect(acceptInvitation(token, input)).rejects.toMatchObject({ code: 'notFound' });
    const { members, invitations } = await listPeople(house.owner);
    expect(members.find((member) => member.email === email)).toMatchObject({
      role: 'refurbisher',
      active: true,
    });
    expect(invitations.map(({ id }) => id)).not.toContain(row.id);
    await signIn({ email, password: input.password }, '');
  });

  test('a second one to the same address ends the first', async () => {
    const email = 'twice@example.org';
    await invite(house.owner, { email, role: 'grader' });
    const first = await mailedToken(email);
    await invite(house.owner, { email, role: 'refurbisher' });
    const second = await mailedToken(email);
    await expect(invitationOf(first)).rejects.toMatchObject({ code: 'notFound' });
    expect((await invitationOf(second)).role).toBe('refurbisher');
  });

  test('to someone who has an account asks for its password', async () => {
    const other = await makeHouse();
    const { email } = house.refurbisher;
    await invite(other.owner, { email, role: 'grader' });
    const token = await mailedToken(email);
    const wrong = acceptInvitation(token, { name: 'X', password: 'someone else’s password' });
    await expect(wrong).rejects.toMatchObject({ fields: { password: expect.any(String) } });
    await acceptInvitation(token, { name: 'X', password });
    expect((await listPeople(other.owner)).members.map((member) => member.email)).toContain(email);
  });

  test('to a member is refused, and an old one has ended', async () => {
    const { email } = house.grader;
    await expect(invite(house.owner, { email, role: 'owner' })).rejects.toMatchObject({
      code: 'conflict',
    });
    await invite(house.owner, { email: 'late@example.org', role: 'grader' });
    const token = await mailedToken('late@example.org');
    await db().Invitation.update(
      { expiresAt: new Date(Date.now() - 1) },
      { where: { email: 'late@example.org' } },
    );
    await expect(invitationOf(token)).rejects.toMatchObject({ code: 'notFound' });
  });
});

describe('a forgotten password', () => {
  test('is replaced by a mailed link, once, and ends every session', async () => {
    const member = await makeMember(house.shop, 'grader');
    await forgotPassword({ email: member.email });
    const token = await mailedToken(member.email);
    await resetPassword(token, { password: 'quite another password' });
    expect(await actorOf(await cookieOf(member))).toBeNull();
    await expect(signIn({ email: member.email, password }, '')).rejects.toMatchObject({
      code: 'unauthorized',
    });
    await signIn({ email: member.email, password: 'quite another password' }, '');
    const again = resetPassword(token, { password: 'and another password' });
    await expect(again).rejects.toMatchObject({ code: 'notFound' });
  });

  test('of nobody sends nothing and says nothing', async () => {
    const before = await db().MailLog.count();
    await expect(forgotPassword({ email: 'stranger@example.org' })).resolves.toBeUndefined();
    expect(await db().MailLog.count()).toBe(before);
  });

  test('a link older than an hour has ended', async () => {
    const { email, userId } = await makeMember(house.shop, 'grader');
    await forgotPassword({ email });
    const token = await mailedToken(email);
    await db().PasswordToken.update({ expiresAt: new Date(Date.now() - 1) }, { where: { userId } });
    await expect(resetPassword(token, { password: 'a new password' })).rejects.toMatchObject({
      code: 'notFound',
    });
  });

  // The secrets of links are kept as hashes only (common practice, no source).
  test('no token stands in the database', async () => {
    const { email } = await makeMember(house.shop, 'grader');
    await forgotPassword({ email });
    const token = await mailedToken(email);
    const rows = await db().PasswordToken.findAll({ raw: true });
    expect(token).toHaveLength(43);
    expect(JSON.stringify(rows)).not.toContain(token);
    const mails = await db().MailLog.findAll({ where: { recipient: email }, raw: true });
    expect(JSON.stringify(mails)).not.toContain(token);
  });
});
