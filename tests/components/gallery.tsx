// Draws every picture and the report to files and photographs them: node --import tsx tests/components/gallery.tsx <folder>
import { mkdirSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { pathToFileURL } from 'node:url';
import { chromium } from 'playwright-core';
import { renderToStaticMarkup } from 'react-dom/server';
import { Gallery } from './gallery-page';

const root = process.cwd();
const folder = process.argv[2] ?? '/tmp/mendlight-gallery';
const css = readFileSync(process.argv[3] ?? join(root, 'dist/gallery.css'), 'utf8').replaceAll(
  '/fonts/',
  `${pathToFileURL(join(root, 'public/fonts')).href}/`,
);
mkdirSync(folder, { recursive: true });
const browser = await chromium.launch({
  executablePath: '/usr/bin/chromium',
  args: ['--no-sandbox', '--disable-gpu', '--disable-dev-shm-usage'],
});
for (const theme of ['light', 'safelight']) {
  const file = join(folder, `gallery-${theme}.html`);
  writeFileSync(
    file,
    `<!doctype html><html lang="en" data-theme="${theme}"><meta charset="utf-8"><meta name="viewport" content="width=device-width"><style>${css}</style><body>${renderToStaticMarkup(<Gallery />)}`,
  );
  for (const width of [390, 1280]) {
    const page = await browser.newPage({ viewport: { width, height: 900 } });
    await page.goto(pathToFileURL(file).href);
    await page.screenshot({ path: join(folder, `gallery-${theme}-${width}.png`), fullPage: true });
    await page.close();
  }
}
await browser.close();
