import { createHash, randomBytes } from 'node:crypto';
import { mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { Browser } from 'playwright-core';
import sharp from 'sharp';
import { afterAll, beforeAll, expect, inject, test } from 'vitest';
import { launch, live, newPage, signIn } from './browser';
import { callerAs, personOf, readRun, testedUnit } from './shop';

const appUrl = inject('appUrl');
const folder = mkdtempSync(join(tmpdir(), 'mendlight-large-'));
let browser: Browser;
beforeAll(async () => {
  browser = await launch();
});
afterAll(async () => {
  await browser?.close();
  rmSync(folder, { recursive: true, force: true });
});

// stack.md, next: proxy: "A request body on a path that proxy matches is cut at 10 MB and the route still answers 200".
test('a picture of 30 MB arrives whole', async () => {
  const [width, height] = [3600, 2800];
  const file = join(folder, 'NOISE.TIF');
  await sharp(randomBytes(width * height * 3), { raw: { width, height, channels: 3 } })
    .tiff({ compression: 'none' })
    .toFile(file);
  const bytes = readFileSync(file);
  expect(bytes.length).toBeGreaterThan(30_000_000);

  const { email, password } = personOf('refurbisher');
  const caller = await callerAs(appUrl, { email, password });
  const { tag, runId } = await testedUnit(caller, 'TSK12-600777', []);
  const { page } = await newPage(browser, appUrl);
  await signIn(page, email, password);
  await page.goto(`/units/${tag}/runs/${runId}`);
  await live(page.getByRole('button', { name: 'Choose photographs' }));
  await page.getByTestId('pick').setInputFiles(file);
  await page.getByText(/^1 analysed$/).waitFor({ timeout: 120_000 });

  const [shot] = (await readRun(caller, runId)).shotList;
  const sha256 = createHash('sha256').update(bytes).digest('hex');
  expect(shot).toMatchObject({ sha256, bytes: bytes.length, state: 'done' });
  await caller.dispose();
});
