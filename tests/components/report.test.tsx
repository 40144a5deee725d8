import { execFileSync } from 'node:child_process';
import { existsSync, mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import AxeBuilder from '@axe-core/playwright';
import type { Browser } from 'playwright-core';
import { renderToStaticMarkup } from 'react-dom/server';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { renderMissing, renderReport } from '@/components/report/render';
import type { ReportContent } from '@/lib/shared/report';
import { launch, origin, serve } from './browser';
import { content, extreme } from './fixture';

const folder = mkdtempSync(join(tmpdir(), 'mendlight-report-'));
const versions = [{ version: 1, publishedAt: content.publishedAt, sha256: 'c'.repeat(64) }];
const standing = { sha256: 'c'.repeat(64), withdrawn: null, versions };
let css = '';
let browser: Browser | undefined;

const page = (report: ReportContent, now = {}) =>
  renderReport(renderToStaticMarkup, {
    content: report,
    standing: { ...standing, ...now },
    css,
    origin,
  });

beforeAll(async () => {
  const out = join(folder, 'report.css');
  execFileSync(process.execPath, [
    'node_modules/@tailwindcss/cli/dist/index.mjs',
    ...['-i', 'components/report/report.css', '-o', out, '--minify'],
  ]);
  css = readFileSync(out, 'utf8');
  if (existsSync('/usr/bin/chromium')) browser = await launch();
}, 60_000);
afterAll(async () => {
  await browser?.close();
  rmSync(folder, { recursive: true });
});

describe('the public report', () => {
  test('is one page of less than 100 kB with its stylesheet, and needs no script', () => {
    const html = page(content);
    expect(Buffer.byteLength(html)).toBeLessThan(100_000);
    const scripts = [...html.matchAll(/<script[^>]*>/g)].map(String);
    expect(scripts).toEqual(['<script type="application/ld+json">']);
    expect(html.match(/\son[a-z]+="|javascript:/)).toBeNull();
    // The policy names the stylesheet by its hash, so no element may carry a style of its own.
    expect(html.match(/\sstyle="/)).toBeNull();
  });

  test('shows the grade, every finding, rule, check, caution and hash', () => {
    const html = page(content);
    const ruled = new Set(content.rules.map(({ quantity }) => quantity));
    const told = [
      content.headline,
      content.summary,
      ...content.good.map(({ title }) => title),
      ...content.weak.map(({ title }) => title),
      ...content.rules.map(({ label }) => label),
      ...content.measurements.filter(({ name }) => !ruled.has(name)).map(({ label }) => label),
      ...content.checks.map(({ label }) => label),
      ...content.repair.work,
      ...content.cautions,
      ...content.originals.map(({ sha256 }) => sha256),
      standing.sha256,
      content.unit.serialEnding,
      'Grade B',
    ];
    expect(told.filter((words) => !html.includes(words))).toEqual([]);
  });

  test('escapes whatever a shop typed, in the page and in its data for search engines', () => {
    const html = page({
      ...content,
      headline: '</script><img src=x onerror=alert(1)>',
      repair: { ...content.repair, fault: '<b>"loose" & dark</b>' },
    });
    expect(html.includes('<img src=x')).toBe(false);
    expect(html.includes('&lt;b&gt;&quot;loose&quot; &amp; dark&lt;/b&gt;')).toBe(true);
    expect(html.match(/<\/script>/gi)).toHaveLength(1);
  });

  test('says first that it was withdrawn, when and why', () => {
    const html = page(content, {
      withdrawn: { at: '2026-04-02T09:00:00.000Z', reason: 'The lens has a crack.' },
    });
    expect(html.indexOf('withdrawn on 2 April 2026')).toBeGreaterThan(0);
    expect(html.indexOf('withdrawn on 2 April 2026')).toBeLessThan(html.indexOf('<h1'));
    expect(html.includes('The lens has a crack.')).toBe(true);
    expect(html.includes('noindex')).toBe(true);
  });

  test('says so when the repairer graded, when the grader overrode, and when nothing was drawn', () => {
    const html = page(extreme);
    expect(html.includes('the person who repaired it')).toBe(true);
    expect(html.includes('The lens mount is bent')).toBe(true);
    expect(html.includes('Parts only')).toBe(true);
    expect(html.includes('id="sharpness"')).toBe(false);
    expect(html.includes('No weakness was found')).toBe(true);
  });

  test('a missing report says what to do', () => {
    expect(renderMissing(renderToStaticMarkup, css)).toContain('There is no report here');
  });
});

describe.runIf(existsSync('/usr/bin/chromium'))('in Chromium', () => {
  test.each([390, 1280])(
    'at %d px: no violation that axe finds by WCAG 2.2 AA, nothing wider than the screen',
    async (width) => {
      const context = await browser!.newContext({ viewport: { width, height: 900 } });
      const tab = await context.newPage();
      await serve(tab, page(content));
      await tab.evaluate(() => {
        for (const details of document.querySelectorAll('details')) details.open = true;
      });
      const { violations } = await new AxeBuilder({ page: tab })
        .withTags(['wcag2a', 'wcag2aa', 'wcag21aa', 'wcag22aa'])
        .analyze();
      expect(violations.map(({ id, nodes }) => `${id}: ${nodes[0]?.html}`)).toEqual([]);
      const wide = await tab.evaluate(() => document.documentElement.scrollWidth);
      expect(wide).toBeLessThanOrEqual(width);
      await context.close();
    },
    180_000,
  );

  test('a report as full as a real one prints on two sheets of A4', async () => {
    const tab = await browser!.newPage();
    await serve(tab, page(content));
    const pdf = (await tab.pdf({ preferCSSPageSize: true })).toString('latin1');
    expect(pdf.match(/\/Type\s*\/Page\b/g)).toHaveLength(2);
    await tab.close();
  });
});
