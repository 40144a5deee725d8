import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { createConnection } from 'mariadb';
import type { APIRequestContext } from 'playwright-core';
import { afterAll, expect, test } from 'vitest';
import {
  migrate,
  productEnvironment,
  serve,
  startDatabase,
  startFakes,
} from '@/scripts/lib/local.mjs';
import { freePort, run } from '@/scripts/lib/processes.mjs';
import { asPhotograph, renderTarget } from './photographs';
import { callerAs, mailedLink, measured, readRun, testedUnit } from './shop';

const root = process.cwd();
const folder = mkdtempSync(join(tmpdir(), 'mendlight-crash-'));
const running: { stop(): Promise<void> }[] = [];
afterAll(async () => {
  for (const service of running.reverse()) await service.stop();
  rmSync(folder, { recursive: true, force: true });
}, 60_000);

async function keep<T extends { stop(): Promise<void> }>(start: Promise<T>): Promise<T> {
  const service = await start;
  running.push(service);
  return service;
}

const owner = { email: 'runa@ropewalk.example', password: 'kept-in-the-drawer-9' };

// Issue 2: "pending work lives in the database and survives `kill -9` of the server".
test('a server killed while it measures goes on after its next start, and does nothing twice', async () => {
  const database = await keep(startDatabase(folder));
  const fakes = await keep(startFakes(root, folder));
  await migrate(root, database.url);
  const port = await freePort();
  const services = { ...fakes.environment, DATABASE_URL: database.url, WORKERS: '2' };
  const environment = productEnvironment(folder, port, services);
  const first = await serve(root, folder, environment, port);
  running.push(first);
  const caller = await openShop(environment);

  const pixels = await renderTarget(5);
  const seconds = [0, 1, 2, 3, 4, 5];
  const files = await Promise.all(seconds.map((s) => asPhotograph(pixels, 'TSK12-900', s)));
  const { runId } = await testedUnit(caller, 'TSK12-900', files);
  const states = async () => (await readRun(caller, runId)).shotList.map(({ state }) => state);
  await expect.poll(states, { timeout: 60_000, interval: 50 }).toContain('analysing');
  first.child.kill('SIGKILL');
  await new Promise((resolve) => first.child.once('exit', resolve));
  const open = await count(
    "SELECT COUNT(*) AS count FROM jobs WHERE kind = 'analyse-shot' AND state <> 'done'",
  );
  expect(open).toBeGreaterThan(0);

  await keep(serve(root, folder, environment, port));
  await measured(caller, runId);
  await caller.dispose();
  expect(await count('SELECT COUNT(*) AS count FROM shots')).toBe(files.length);
  expect(await count('SELECT COUNT(*) AS count FROM analyses')).toBe(files.length);
  expect(await count('SELECT COUNT(DISTINCT shotId) AS count FROM analyses')).toBe(files.length);
  const twice =
    'SELECT 1 FROM measurements GROUP BY analysisId, name, zone, edge HAVING COUNT(*) > 1';
  expect(await count(`SELECT COUNT(*) AS count FROM (${twice}) AS twice`)).toBe(0);

  async function count(sql: string): Promise<number> {
    const connection = await createConnection(database.url.replace(/^mysql:/, 'mariadb:'));
    const [row] = await connection.query<{ count: bigint }[]>(sql);
    await connection.end();
    return Number(row?.count);
  }
});

/** Opens a shop by the command for that; its owner chooses a password by the mailed link. */
async function openShop(environment: Record<string, string>): Promise<APIRequestContext> {
  const { APP_URL } = environment;
  if (!APP_URL) throw new Error('The product has no address.');
  const who = ['--shop', 'Ropewalk Repair', '--name', 'Runa Holt', '--email', owner.email];
  await run(
    process.execPath,
    ['--conditions=react-server', '--import', 'tsx', 'scripts/open-shop.ts', ...who],
    { cwd: root, env: { ...process.env, ...environment } },
  );
  const link = await mailedLink(join(folder, 'mail'), owner.email, 'password');
  const answer = await fetch(link.replace('/password/', '/api/password/'), {
    method: 'POST',
    headers: { 'content-type': 'application/json' },
    body: JSON.stringify({ password: owner.password }),
  });
  expect(answer.status).toBe(204);
  return callerAs(APP_URL, owner);
}
