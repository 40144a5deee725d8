// Photographs every primitive, every picture and the report, to be looked at:
// node --import tsx tests/components/gallery.tsx <folder> <gallery.css> <report.css>
import { mkdirSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { renderToStaticMarkup } from 'react-dom/server';
import { renderReport } from '@/components/report/render';
import { launch, origin, serve } from './browser';
import { content, extreme } from './fixture';
import { Gallery } from './gallery-page';

const [folder = '/tmp/gallery', galleryCss = '', reportCss = 'dist/report.css'] =
  process.argv.slice(2);
mkdirSync(folder, { recursive: true });

const browser = await launch();
async function photograph(name: string, html: string, widths: number[]) {
  for (const width of widths) {
    const page = await browser.newPage({ viewport: { width, height: 900 } });
    await serve(page, html);
    await page.screenshot({ path: join(folder, `${name}-${width}.png`), fullPage: true });
    if (name.startsWith('report') && width === 1280) {
      await page.pdf({ path: join(folder, `${name}.pdf`), preferCSSPageSize: true });
    }
    await page.close();
  }
}

if (galleryCss) {
  const css = readFileSync(galleryCss, 'utf8');
  const body = renderToStaticMarkup(<Gallery />);
  for (const theme of ['daylight', 'safelight']) {
    const html = `<!doctype html><html lang="en" data-theme="${theme}"><meta charset="utf-8"><meta name="viewport" content="width=device-width"><style>${css}</style><body>${body}`;
    await photograph(`gallery-${theme}`, html, [390, 1280]);
  }
}

const css = readFileSync(reportCss, 'utf8');
const first = { version: 1, publishedAt: content.publishedAt, sha256: 'c'.repeat(64) };
const reports = {
  report: { content, standing: { sha256: 'c'.repeat(64), withdrawn: null, versions: [first] } },
  'report-extreme': {
    content: extreme,
    standing: {
      sha256: 'd'.repeat(64),
      withdrawn: { at: '2026-04-02T09:00:00.000Z', reason: 'The buyer found a crack in the lens.' },
      versions: [first, { ...first, version: 2 }],
    },
  },
};
for (const [name, report] of Object.entries(reports)) {
  const html = renderReport(renderToStaticMarkup, { ...report, css, origin });
  writeFileSync(join(folder, `${name}.html`), html);
  console.log(`${name}: ${(Buffer.byteLength(html) / 1000).toFixed(1)} kB`);
  await photograph(name, html, [390, 1280, 1920]);
}
await browser.close();
