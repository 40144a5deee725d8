import { existsSync, mkdirSync, readFileSync, writeFileSync } from 'node:fs';
import { join, resolve } from 'node:path';
import { fileURLToPath } from 'node:url';
import { installDebian, installPackages } from './lib/install.mjs';
import { endRuns, freePort } from './lib/processes.mjs';
import { seconds, step } from './lib/steps.mjs';

// Plain Node, and nothing but Node's own modules until the packages are installed.
const root = fileURLToPath(new URL('..', import.meta.url)).replace(/\/$/, '');
const folder = resolve(root, process.env.DATA ?? 'var');
const begun = performance.now();
const mariadbPackages = {
  mariadbd: 'mariadb-server-core',
  'mariadb-install-db': 'mariadb-server-core',
  my_print_defaults: 'mariadb-client-core',
};
/** What has been started, last first to be ended. */
const running = [];
let ending = null;

function end(code) {
  ending ??= (async () => {
    if (running.length > 0) console.log('Ending what was started …');
    endRuns();
    for (const service of running.reverse()) await service.stop();
    process.exit(code);
  })();
  return ending;
}
process.on('SIGINT', () => end(0));
process.on('SIGTERM', () => end(0));

async function keep(what, start) {
  const service = await start();
  running.push(service);
  service.child.once('exit', () => {
    if (ending) return;
    console.error(`${what} has ended unexpectedly; its log lies in ${folder}.`);
    end(1);
  });
  return service;
}

/** Two starts on one folder would fight for its database. */
function claimFolder() {
  mkdirSync(folder, { recursive: true });
  const file = join(folder, 'start.pid');
  const other = existsSync(file) ? readFileSync(file, 'utf8') : '';
  const commandLine = `/proc/${other}/cmdline`;
  const runs = other !== '' && existsSync(commandLine);
  if (runs && readFileSync(commandLine, 'utf8').includes('start.mjs')) {
    throw new Error(
      `Mendlight runs already on ${folder}. End it first (Ctrl-C there, or: kill ${other}), or start with DATA=another-folder.`,
    );
  }
  writeFileSync(file, String(process.pid));
}

async function main() {
  claimFolder();
  await step('Packages from npm', () => installPackages(root));
  const { buildIfStale } = await import('./lib/built.mjs');
  const local = await import('./lib/local.mjs');
  const { services, demo } = await startServices(local);
  await step('Tables', () => local.migrate(root, services.DATABASE_URL));
  await step('Build', () => buildIfStale(root));
  const port = await freePort(Number(process.env.PORT ?? 3000));
  const environment = local.productEnvironment(folder, port, services);
  await step('Server', async () => {
    await keep('The server', () => local.serve(root, folder, environment, port));
  });
  if (demo) await openDemoShop(environment, demo);
  console.log(`\n  Mendlight is at ${environment.APP_URL}`);
  console.log(`\n${seconds(begun)}  Ready. Ctrl-C ends everything.`);
}

/** Our own database and stand-ins, or those that the environment names. */
async function startServices(local) {
  const own = {
    database: !process.env.DATABASE_URL,
    store: !process.env.S3_BUCKET,
    mail: !process.env.SMTP_URL,
  };
  const services = own.database ? { LOCAL_MODE: '1' } : { DATABASE_URL: process.env.DATABASE_URL };
  let demo = null;
  const database = async () => {
    const started = await keep('MariaDB', () => local.startDatabase(folder));
    services.DATABASE_URL = started.url;
    return `port ${started.port}`;
  };
  const standIns = async () => {
    const started = await keep('The stand-ins', () => local.startFakes(root, folder));
    demo = started.demo;
    for (const [name, value] of Object.entries(started.environment)) {
      if (name.startsWith('S3_') ? own.store : own.mail) services[name] = value;
    }
    return `mails are kept in ${join(folder, 'mail')}`;
  };
  if (own.database) await step('MariaDB, the program', () => installDebian(mariadbPackages));
  await Promise.all([
    own.database && step('MariaDB on loopback', database),
    Object.values(own).some(Boolean) && step('Stand-ins for object store and mail', standIns),
  ]);
  return { services, demo: own.database ? demo : null };
}

/** Says who may sign in, and fills an empty database in the background. */
async function openDemoShop(environment, { people, password }) {
  const { startSeeding } = await import('./lib/local.mjs');
  if (!existsSync(join(folder, 'seeded'))) {
    await step('People of the demo shop', async () => {
      const seeding = await startSeeding(root, folder, environment);
      running.push(seeding);
      seeding.ended.then((code) => {
        if (ending) return;
        running.splice(running.indexOf(seeding), 1);
        console.log(
          code === 0
            ? `${seconds(begun)}  The demo shop is complete.`
            : `The demo shop is not complete: ${join(folder, 'seed.log')} says why; the next start goes on with it.`,
        );
      });
      return 'its photographs are made and measured while you look round';
    });
  }
  console.log(`\n  Sign in with the password ${password} as`);
  for (const { name, email, role } of people) {
    console.log(`    ${role.padEnd(12)} ${email.padEnd(26)} ${name}`);
  }
}

main().catch((error) => {
  if (!ending) console.error(`\n${error.message}`);
  return end(1);
});
