import type { APIRequestContext, Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, expect, inject, test } from 'vitest';
import { axe, launch, newPage, sideways, signIn } from './browser';
import { asPhotograph, renderTarget } from './photographs';
import {
  callerAs,
  measured,
  personOf,
  published,
  readRun,
  sendToGrading,
  testedUnit,
} from './shop';

// Every page fits a phone and a wide screen and complains of nothing, a violation of the content security policy least of
// all; axe finds nothing against WCAG 2.2 AA, in either theme.

const appUrl = inject('appUrl');
let browser: Browser;
let paths: { shop: string[]; open: string[] };

beforeAll(async () => {
  browser = await launch();
  const refurbisher = await callerAs(appUrl, personOf('refurbisher'));
  const grader = await callerAs(appUrl, personOf('grader'));
  paths = await prepare(refurbisher, grader);
  await refurbisher.dispose();
  await grader.dispose();
}, 180_000);
afterAll(() => browser?.close());

/** A published unit and one that awaits its grade, with a shot that could not be measured. */
async function prepare(refurbisher: APIRequestContext, grader: APIRequestContext) {
  const pixels = await renderTarget(4);
  const files = (serial: string) =>
    Promise.all([0, 1].map((second) => asPhotograph(pixels, serial, second)));
  const first = await testedUnit(refurbisher, 'TSK12-500301', await files('TSK12-500301'));
  const second = await testedUnit(refurbisher, 'TSK12-500302', await files('TSK12-500302'));
  for (const { tag, runId } of [first, second]) {
    await measured(refurbisher, runId);
    await sendToGrading(refurbisher, tag);
  }
  const { slug } = await published(grader, first.tag);
  const run = `/units/${second.tag}/runs/${second.runId}`;
  const { shotList } = await readRun(refurbisher, second.runId);
  return {
    shop: [
      '/bench',
      '/arrivals',
      `/units/${first.tag}`,
      `/units/${second.tag}`,
      run,
      `${run}/shots/${shotList[0]?.id}`,
      '/grading',
      `/grading/${second.tag}`,
      '/published',
      '/targets',
      '/settings',
      '/bench?q=nothing-of-this-name',
    ],
    open: ['/', '/sign-in', '/forgotten', `/r/${slug}`, '/invitations/none', '/password/none'],
  };
}

const looks = [
  [390, 'safelight'],
  [1280, 'daylight'],
] as const;

test.each(looks)(
  'at %d px in %s',
  async (width, theme) => {
    const { page, complaints } = await newPage(browser, appUrl, { width });
    await page.context().addCookies([{ name: 'theme', value: theme, url: appUrl }]);
    const wrong: string[] = [];
    for (const path of paths.open) wrong.push(...(await lookAt(page, path, theme)));
    const { email, password } = personOf('owner');
    await signIn(page, email, password);
    for (const path of paths.shop) wrong.push(...(await lookAt(page, path, theme)));
    expect([...wrong, ...complaints]).toEqual([]);
    await page.context().close();
  },
  600_000,
);

/** axe takes its time, so it is spared the pages that are built from the same pieces. */
const likeOthers = /^\/(forgotten|invitations|password|arrivals|targets|grading$|bench\?)/;

async function lookAt(page: Page, path: string, theme: string): Promise<string[]> {
  const answer = await page.goto(path, { waitUntil: 'load' });
  const wrong = answer?.status() === 200 ? [] : [`${path} answers ${answer?.status()}`];
  await page.getByRole('heading', { level: 1 }).first().waitFor();
  await page.evaluate(() => document.fonts.ready);
  const shown = await page.evaluate(() => document.documentElement.dataset.theme ?? 'daylight');
  if (shown !== theme && !path.startsWith('/r/')) wrong.push(`${path} is shown in ${shown}`);
  wrong.push(...(await sideways(page)));
  if (!likeOthers.test(path)) wrong.push(...(await axe(page)));
  return wrong;
}
