import { mkdir } from 'node:fs/promises';
import { join } from 'node:path';
import { type BrowserContext, chromium, type Page } from 'playwright-core';
import sharp from 'sharp';
import type { Page as ListPage, RunDetail, UnitDetail, UnitRow } from '../lib/shared/api';
import { demoPassword, demoPeople } from '../lib/shared/demo';
import { unitStates } from '../lib/shared/words';

/**
 * Photographs every page of a running demo shop at a phone's and a desk's width, and the README's picture:
 * npm run screenshots -- http://localhost:3000 folder
 */
const [base = 'http://localhost:3000', folder = 'var/screenshots'] = process.argv.slice(2);
const widths = [390, 1280];

async function main() {
  await mkdir(folder, { recursive: true });
  const browser = await chromium.launch({
    executablePath: '/usr/bin/chromium',
    args: ['--no-sandbox', '--disable-gpu', '--disable-dev-shm-usage'],
  });
  try {
    const context = await browser.newContext({ baseURL: base, reducedMotion: 'reduce' });
    context.setDefaultTimeout(60_000);
    const page = await context.newPage();
    await shootAll(page, ['/', '/sign-in', '/forgotten', '/no-such-page']);
    await signIn(page);
    const units = await unitsOf(context);
    await readmePicture(page, units);
    await shootAll(page, pathsOf(units));
  } finally {
    await browser.close();
  }
}

async function signIn(page: Page): Promise<void> {
  const owner = demoPeople.find((person) => person.role === 'owner');
  await page.goto('/sign-in', { waitUntil: 'networkidle' });
  await page.getByLabel('E-mail address').fill(owner?.email ?? '');
  await page.getByLabel('Password').fill(demoPassword);
  await page.getByRole('button', { name: 'Sign in' }).click();
  await page.waitForURL('**/bench');
}

/** One unit a state that the shop has, with everything about it. */
async function unitsOf(context: BrowserContext): Promise<UnitDetail[]> {
  const get = async <T>(path: string) => (await (await context.request.get(path)).json()) as T;
  const { rows } = await get<ListPage<UnitRow>>('/api/units?pageSize=100');
  const chosen = unitStates.flatMap((state) => rows.find((unit) => unit.state === state) ?? []);
  return Promise.all(chosen.map(({ tag }) => get<UnitDetail>(`/api/units/${tag}`)));
}

function pathsOf(units: readonly UnitDetail[]): string[] {
  const shop = ['/bench', '/arrivals', '/grading', '/published', '/targets', '/settings'];
  const ofUnits = units.flatMap((unit) => [
    `/units/${unit.tag}`,
    ...unit.runs.slice(0, 1).map((run) => `/units/${unit.tag}/runs/${run.id}`),
    ...(unit.state === 'awaiting-grade' ? [`/grading/${unit.tag}`] : []),
    ...(unit.report ? [`/r/${unit.report.slug}`] : []),
  ]);
  return [...shop, ...ofUnits];
}

async function shootAll(page: Page, paths: readonly string[]): Promise<void> {
  for (const path of paths) {
    for (const width of widths) {
      await open(page, path, width, 900);
      const wider = await page.evaluate(
        () => document.documentElement.scrollWidth - window.innerWidth,
      );
      const name = `${path.replace(/[^a-zA-Z0-9-]+/g, '_').replace(/^_/, '') || 'start'}-${width}`;
      await page.screenshot({ path: join(folder, `${name}.png`), fullPage: true });
      console.log(`${name}${wider > 0 ? `: ${wider} px wider than the screen` : ''}`);
    }
  }
}

/** Opens a page and waits for its pictures, those far down too. */
async function open(page: Page, path: string, width: number, height: number): Promise<void> {
  await page.setViewportSize({ width, height });
  await page.goto(path, { waitUntil: 'load' });
  await page.evaluate(async () => {
    await document.fonts.ready;
    const pictures = [...document.images];
    for (const picture of pictures) picture.loading = 'eager';
    await Promise.all(pictures.map((picture) => picture.decode().catch(() => undefined)));
  });
}

/** A run with something to tell: the worst graded unit's newest. */
async function readmePicture(page: Page, units: readonly UnitDetail[]): Promise<void> {
  const measured = units.filter((unit) => unit.runs.some((run) => run.done > 1));
  const unit = measured.toSorted((a, b) => (b.grade ?? '').localeCompare(a.grade ?? ''))[0];
  const run = unit?.runs.find(({ done }: Pick<RunDetail, 'done'>) => done > 1);
  if (!unit || !run) throw new Error('No unit has a measured run; is the demo shop complete?');
  await open(page, `/units/${unit.tag}/runs/${run.id}`, 1440, 1200);
  const shot = await page.screenshot();
  const path = join(folder, 'readme.webp');
  await sharp(shot).webp({ quality: 82 }).toFile(path);
  console.log(path);
}

await main();
