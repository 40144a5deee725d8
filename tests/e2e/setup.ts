import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { TestProject } from 'vitest/node';
import { buildIfStale } from '@/scripts/lib/built.mjs';
import {
  migrate,
  productEnvironment,
  serve,
  startDatabase,
  startFakes,
} from '@/scripts/lib/local.mjs';
import { freePort } from '@/scripts/lib/processes.mjs';

declare module 'vitest' {
  interface ProvidedContext {
    /** Where the built product is served: the demo shop and its people (lib/shared/demo.ts), and nothing else in it. */
    appUrl: string;
  }
}

/** The built product on a free port with a database, store and mail of its own in a temporary folder. */
export default async function setup(project: TestProject): Promise<() => Promise<void>> {
  const root = process.cwd();
  const folder = mkdtempSync(join(tmpdir(), 'mendlight-e2e-'));
  const running: { stop(): Promise<void> }[] = [];
  const end = async () => {
    for (const service of running.reverse()) await service.stop();
    rmSync(folder, { recursive: true, force: true });
  };
  try {
    const database = await startDatabase(folder);
    running.push(database);
    const fakes = await startFakes(root, folder);
    running.push(fakes);
    await migrate(root, database.url);
    await buildIfStale(root);
    const services = { ...fakes.environment, DATABASE_URL: database.url, LOCAL_MODE: '1' };
    const port = await freePort();
    const environment = productEnvironment(folder, port, services);
    running.push(await serve(root, folder, environment, port));
    await fillShop(environment);
    project.provide('appUrl', environment.APP_URL);
    project.provide('mailFolder', join(folder, 'mail'));
    project.provide('databaseUrl', database.url);
    return end;
  } catch (error) {
    await end();
    throw error;
  }
}

async function fillShop(environment: Record<string, string>): Promise<void> {
  const before = { ...process.env };
  Object.assign(process.env, environment);
  const { openShop } = await import('@/fixtures/demo/open-shop');
  const { db } = await import('@/lib/server/db');
  await openShop();
  await db().sequelize.close();
  // The tests' processes inherit what is set here, and must not take it for their own settings.
  for (const name of Object.keys(environment)) delete process.env[name];
  Object.assign(process.env, before);
}
