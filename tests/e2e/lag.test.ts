import type { Browser } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, inject, test } from 'vitest';
import { decode } from '@/analysis/decode';
import { readTimingPage } from '@/analysis/time/read-timing-page';
import { axe, launch, live, newPage, sideways } from './browser';

const appUrl = inject('appUrl');
let browser: Browser;
beforeAll(async () => {
  browser = await launch();
}, 60_000);
afterAll(() => browser?.close());

/** The running page on a screen of this width, opened by somebody who is signed in to nobody. */
async function running(width: number) {
  const { page, complaints } = await newPage(browser, appUrl, { width });
  await page.goto('/lag');
  const start = page.getByRole('button', { name: 'Start' });
  await live(start);
  return { page, complaints, start };
}

async function photograph(page: Awaited<ReturnType<typeof running>>['page']) {
  const { frame } = await decode(await page.screenshot());
  return readTimingPage(frame, null);
}

describe.each([390, 1280])('the timing page, %d px wide', (width) => {
  test('stands still where less motion is asked for, until it is started; then a program reads it', async () => {
    const { page, complaints, start } = await running(width);
    await expect(photograph(page)).rejects.toThrow(/not found/);
    await start.click();
    const words = page.getByText(/This screen’s frame lasts/);
    await words.waitFor();
    const told = Number(/lasts ([\d.]+) ms/.exec((await words.textContent()) ?? '')?.[1]);

    const before = performance.now();
    const first = await photograph(page);
    const between = performance.now();
    await page.waitForTimeout(700);
    const resumed = performance.now();
    const second = await photograph(page);
    const after = performance.now();
    expect(first.frameTime).toBeCloseTo(told, 2);
    // The page's own clock against ours: between the two pictures lies no less than the wait, no more than all of it.
    const passed = (second.elapsed - first.elapsed + 4000) % 4000;
    expect(passed).toBeGreaterThan(resumed - between - 2 * told);
    expect(passed).toBeLessThan(after - before + 2 * told);

    await page.getByRole('button', { name: 'Stop' }).click();
    await page.waitForTimeout(100);
    const halted = await photograph(page);
    await page.waitForTimeout(300);
    expect((await photograph(page)).elapsed).toBe(halted.elapsed);
    expect(await axe(page)).toEqual([]);
    expect(await sideways(page)).toEqual([]);
    expect(complaints).toEqual([]);
    await page.context().close();
  });
});
