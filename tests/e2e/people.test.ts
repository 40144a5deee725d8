import type { Browser } from 'playwright-core';
import { afterAll, beforeAll, expect, inject, test } from 'vitest';
import { launch, live, newPage, signIn } from './browser';
import { mailedLink, personOf } from './shop';

const appUrl = inject('appUrl');
let browser: Browser;
beforeAll(async () => {
  browser = await launch();
});
afterAll(() => browser?.close());

test('a session ended from the settings elsewhere has really ended', async () => {
  const { email, password } = personOf('refurbisher');
  const lost = await newPage(browser, appUrl);
  await signIn(lost.page, email, password);
  const id = await ownSession(lost.page.request);
  const here = await newPage(browser, appUrl);
  await signIn(here.page, email, password);
  await here.page.goto('/settings');
  const places = here.page.getByRole('region', { name: 'My sessions' }).getByRole('listitem');
  await live(here.page.getByRole('button', { name: 'End it' }));
  // The newest other session is the one that was just lost.
  const before = await places.count();
  const ended = here.page.waitForResponse((answer) => answer.url().endsWith(`/api/sessions/${id}`));
  const buttons = here.page.getByRole('button', { name: 'End it' });
  for (let left = await buttons.count(); left > 0; left = await buttons.count()) {
    await buttons.first().click();
    await expect.poll(() => buttons.count()).toBe(left - 1);
  }
  expect((await ended).status()).toBe(204);
  expect(before).toBeGreaterThan(1);
  await here.page.getByText('Signed in here only').waitFor();

  expect((await lost.page.request.get('/api/units')).status()).toBe(401);
  await lost.page.goto('/bench');
  await lost.page.waitForURL('**/sign-in**');
  await here.page.goto('/bench');
  await here.page.getByRole('heading', { name: 'Bench' }).waitFor();
  expect(here.complaints).toEqual([]);
});

async function ownSession(request: { get(path: string): Promise<{ json(): Promise<unknown> }> }) {
  const sessions = (await (await request.get('/api/sessions')).json()) as {
    id: string;
    current: boolean;
  }[];
  return sessions.find(({ current }) => current)?.id ?? '';
}

test('a forgotten password is set anew by the mailed link, once, and the old one ends', async () => {
  const { email, password } = personOf('grader');
  const fresh = 'new-lamp-in-the-old-shed';
  const { page, complaints } = await newPage(browser, appUrl);
  await page.goto('/sign-in');
  await page.getByRole('link', { name: 'Forgotten?' }).click();
  await page.waitForURL('**/forgotten');
  await live(page.getByRole('button', { name: 'Send the link' }));
  await page.getByLabel('E-mail address').fill(email);
  await page.keyboard.press('Enter');
  await page.getByText('a letter with a link is on its way').waitFor();

  const link = await mailedLink(inject('mailFolder'), email, 'password');
  await page.goto(link);
  await live(page.getByRole('button', { name: 'Set the password' }));
  await page.getByLabel('New password').fill(fresh);
  await page.keyboard.press('Enter');
  await page.getByText('Your new password is set. Sign in with it.').waitFor();
  await signIn(page, email, fresh);

  const other = await newPage(browser, appUrl);
  await other.page.goto('/sign-in');
  await live(other.page.getByRole('button', { name: 'Sign in' }));
  await other.page.getByLabel('E-mail address').fill(email);
  await other.page.getByLabel('Password').fill(password);
  await other.page.keyboard.press('Enter');
  await other.page.getByText('The e-mail address or the password is wrong.').waitFor();

  // The link works once; the demo person gets back the password that the other tests know.
  const set = (token: string, value: string) =>
    page.request.post(`/api/password/${token}`, { data: { password: value } });
  expect((await set(link.split('/').at(-1) ?? '', password)).status()).toBe(404);
  await page.request.post('/api/password/forgotten', { data: { email } });
  await expect.poll(() => mailedLink(inject('mailFolder'), email, 'password')).not.toBe(link);
  const again = await mailedLink(inject('mailFolder'), email, 'password');
  expect((await set(again.split('/').at(-1) ?? '', password)).status()).toBe(204);
  expect(complaints).toEqual([]);
});
