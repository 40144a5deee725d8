import { spawn } from 'node:child_process';
import {
  closeSync,
  existsSync,
  mkdirSync,
  openSync,
  readdirSync,
  readFileSync,
  writeFileSync,
} from 'node:fs';
import { join } from 'node:path';
import { randomPassword, startMariadb } from './mariadb.mjs';
import { lastLines, run, stop } from './processes.mjs';

/** What the checkout's own services have in common from start to start: secrets made here, once. */
export function localSecrets(folder) {
  mkdirSync(folder, { recursive: true });
  const file = join(folder, 'secrets.json');
  if (!existsSync(file)) {
    const made = { databasePassword: randomPassword(), authSecret: randomPassword() };
    writeFileSync(file, JSON.stringify(made, null, 2), { mode: 0o600 });
  }
  return JSON.parse(readFileSync(file, 'utf8'));
}

/** The fakes of store and mail, for whichever of the two the environment doesn't name. */
export async function startFakes(root, folder) {
  const log = openSync(join(folder, 'services.log'), 'a');
  const child = spawn(process.execPath, ['--import', 'tsx', 'scripts/services.ts', folder], {
    cwd: root,
    detached: true,
    stdio: ['ignore', log, log, 'ipc'],
  });
  closeSync(log);
  const addresses = await new Promise((resolve, reject) => {
    child.once('message', resolve);
    child.once('exit', () =>
      reject(
        new Error(`The fakes of store and mail ended:\n${tail(join(folder, 'services.log'))}`),
      ),
    );
  });
  return {
    environment: {
      S3_ENDPOINT: addresses.store,
      S3_BUCKET: 'mendlight',
      S3_KEY: 'S3RVER',
      S3_SECRET: 'S3RVER',
      SMTP_URL: addresses.mail,
    },
    demo: { people: addresses.demoPeople, password: addresses.demoPassword },
    child,
    stop: () => stop(child),
  };
}

export async function startDatabase(folder) {
  return startMariadb({
    folder: join(folder, 'database'),
    password: localSecrets(folder).databasePassword,
  });
}

/** Applies what is missing; asks first, as loading the migrations takes longer than the question. */
export async function migrate(root, databaseUrl) {
  const wanted = readdirSync(join(root, 'migrations')).filter((name) =>
    /^\d{4}-.*\.ts$/.test(name),
  );
  const { createConnection } = await import('mariadb');
  const connection = await createConnection(databaseUrl.replace(/^mysql:/, 'mariadb:'));
  const applied = await connection
    .query('SELECT COUNT(*) AS count FROM schema_migrations')
    .then(([{ count }]) => Number(count))
    .catch(() => 0);
  await connection.end();
  if (applied === wanted.length) return 'up to date';
  const output = await run(process.execPath, ['--import', 'tsx', 'scripts/migrate.ts'], {
    cwd: root,
    env: { ...process.env, DATABASE_URL: databaseUrl },
  });
  return output.trim();
}

/** Serves the built product; resolves when it answers. */
export async function serve(root, folder, environment, port) {
  const host = process.env.HOST ?? '127.0.0.1';
  const log = join(folder, 'server.log');
  const out = openSync(log, 'a');
  const child = spawn(
    process.execPath,
    ['node_modules/next/dist/bin/next', 'start', '-p', String(port), '-H', host],
    {
      cwd: root,
      detached: true,
      stdio: ['ignore', out, out, 'ipc'],
      env: { ...process.env, ...environment },
    },
  );
  closeSync(out);
  const deadline = Date.now() + 60_000;
  for (;;) {
    if (child.exitCode !== null || Date.now() > deadline) {
      throw new Error(`The server did not start. Its log is ${log}; the last lines:\n${tail(log)}`);
    }
    const answer = await fetch(`http://127.0.0.1:${port}/sign-in`).catch(() => null);
    if (answer?.ok) break;
    if (answer && answer.status >= 500) {
      await stop(child);
      throw new Error(
        `The sign-in page answers ${answer.status}. The log is ${log}; the last lines:\n${tail(log)}`,
      );
    }
    await new Promise((resolve) => setTimeout(resolve, 50));
  }
  return { child, stop: () => stop(child) };
}

/** Brings the demo shop into being beside the running server; resolves when its people can sign in. */
export async function startSeeding(root, folder, environment) {
  const log = openSync(join(folder, 'seed.log'), 'a');
  const child = spawn(
    process.execPath,
    ['--conditions=react-server', '--import', 'tsx', 'scripts/seed.ts', folder],
    {
      cwd: root,
      detached: true,
      stdio: ['ignore', log, log, 'ipc'],
      env: { ...process.env, ...environment },
    },
  );
  closeSync(log);
  const ended = new Promise((resolve) => child.once('exit', resolve));
  const opened = new Promise((resolve) => child.once('message', resolve));
  await Promise.race([opened, ended]);
  return { child, ended, stop: () => stop(child) };
}

/** The environment of everything that runs the product here. */
export function productEnvironment(folder, port, services) {
  const appUrl = process.env.APP_URL ?? `http://localhost:${port}`;
  return {
    NODE_ENV: 'production',
    NEXT_TELEMETRY_DISABLED: '1',
    NEXT_MANUAL_SIG_HANDLE: 'true',
    // The S3 SDK announces on every start which Node it will want next year.
    NODE_NO_WARNINGS: '1',
    APP_URL: appUrl,
    NEXTAUTH_URL: appUrl,
    AUTH_SECRET: process.env.AUTH_SECRET ?? localSecrets(folder).authSecret,
    ...services,
  };
}

function tail(file) {
  return existsSync(file) ? lastLines(readFileSync(file, 'utf8')) : '(no log)';
}
