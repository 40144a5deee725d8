import AxeBuilder from '@axe-core/playwright';
import { type Browser, chromium, type Locator, type Page } from 'playwright-core';
import { vi } from 'vitest';

export function launch(): Promise<Browser> {
  return chromium.launch({
    executablePath: '/usr/bin/chromium',
    args: [
      '--no-sandbox',
      '--disable-gpu',
      '--disable-quic',
      '--no-first-run',
      '--disable-background-networking',
      '--disable-component-update',
      '--disable-sync',
      '--disable-dev-shm-usage',
    ],
  });
}

/** A page of a browser of one's own, signed in to nobody yet, and what its console complains of. */
export async function newPage(
  browser: Browser,
  appUrl: string,
  options: { width?: number; javaScript?: boolean } = {},
): Promise<{ page: Page; complaints: string[] }> {
  const context = await browser.newContext({
    baseURL: appUrl,
    viewport: { width: options.width ?? 1280, height: 900 },
    javaScriptEnabled: options.javaScript ?? true,
    reducedMotion: 'reduce',
  });
  context.setDefaultTimeout(45_000);
  const page = await context.newPage();
  const complaints: string[] = [];
  page.on('pageerror', (error) => complaints.push(`${page.url()}: ${error.message}`));
  page.on('console', (message) => {
    if (message.type() !== 'error' && message.type() !== 'warning') return;
    complaints.push(`${page.url()}: ${message.text()} ${message.location().url}`);
  });
  return { page, complaints };
}

/** Signs in by keyboard on the sign-in page; the bench opens. */
export async function signIn(page: Page, email: string, password: string): Promise<void> {
  await page.goto('/sign-in');
  await live(page.getByRole('button', { name: 'Sign in' }));
  await page.getByLabel('E-mail address').fill(email);
  await page.getByLabel('Password').fill(password);
  await page.keyboard.press('Enter');
  await page.waitForURL('**/bench');
}

/** Waits until React has taken over an element that the server sent: a press before that goes nowhere. */
export async function live(locator: Locator): Promise<void> {
  await locator.first().waitFor();
  const taken = (element: Element) =>
    Object.keys(element).some((key) => key.startsWith('__reactProps$'));
  await vi.waitUntil(
    () =>
      locator
        .first()
        .evaluate(taken)
        .catch(() => false),
    { timeout: 30_000 },
  );
}

/** Presses a key until it does what it should: a page just opened may not listen yet. */
export async function pressUntil(
  page: Page,
  key: string,
  done: () => Promise<boolean>,
): Promise<void> {
  const deadline = Date.now() + 30_000;
  do {
    await page.keyboard.press(key);
    for (let look = 0; look < 10; look++) {
      if (await done()) return;
      await page.waitForTimeout(50);
    }
  } while (Date.now() < deadline);
  throw new Error(`The key ${key} did nothing on ${page.url()}.`);
}

export const hasFocus = (locator: Locator): Promise<boolean> =>
  locator.evaluate((element) => element === document.activeElement).catch(() => false);

/** How far the page can be moved sideways, and the widest culprits. */
export async function sideways(page: Page): Promise<string[]> {
  return page.evaluate(() => {
    const width = document.documentElement.clientWidth;
    if (document.documentElement.scrollWidth <= width) return [];
    return [...document.querySelectorAll('body *')]
      .filter((element) => element.getBoundingClientRect().right > width + 1)
      .slice(-3)
      .map((element) => `${location.pathname} at ${width}: ${element.outerHTML.slice(0, 200)}`);
  });
}

/** What axe finds by the WCAG 2.2 AA rules on the page as it stands. */
export async function axe(page: Page): Promise<string[]> {
  const { violations } = await new AxeBuilder({ page })
    .withTags(['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa'])
    .analyze();
  return violations.flatMap(({ id, impact, nodes }) =>
    nodes.map(({ html, failureSummary }) =>
      [page.url(), impact, id, html.slice(0, 240), failureSummary].join(' | '),
    ),
  );
}
