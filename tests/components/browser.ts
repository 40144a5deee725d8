import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { chromium, type Page } from 'playwright-core';
import sharp from 'sharp';

export const origin = 'http://report.test';

export function launch() {
  return chromium.launch({
    executablePath: '/usr/bin/chromium',
    args: ['--no-sandbox', '--disable-gpu', '--disable-dev-shm-usage'],
  });
}

/** Answers the page from memory: the document, the fonts from public/, and a grey square for each picture. */
export async function serve(page: Page, html: string): Promise<void> {
  const square = await greySquare();
  await page.route('**/*', async (route) => {
    const { pathname } = new URL(route.request().url());
    if (pathname.startsWith('/fonts/')) {
      const body = readFileSync(join(process.cwd(), 'public', pathname));
      await route.fulfill({ body, contentType: 'font/woff2' });
    } else if (pathname.includes('/pictures/')) {
      await route.fulfill({ body: square, contentType: 'image/png' });
    } else {
      await route.fulfill({ body: html, contentType: 'text/html; charset=utf-8' });
    }
  });
  await page.goto(`${origin}/r/sample`);
  await page.evaluate(() => document.fonts.ready);
}

function greySquare(): Promise<Buffer> {
  const svg =
    '<svg xmlns="http://www.w3.org/2000/svg" width="300" height="225"><rect width="300" height="225" fill="#a3a3a3"/><rect x="90" y="60" width="150" height="150" transform="rotate(5 165 135)" fill="#555"/></svg>';
  return sharp(Buffer.from(svg)).png().toBuffer();
}
