import { spawn } from 'node:child_process';
import { existsSync, mkdirSync, readdirSync, readFileSync, rmSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { installDebian, installPackages } from './lib/install.mjs';
import { run } from './lib/processes.mjs';
import { seconds, step } from './lib/steps.mjs';

// Plain Node until the packages are installed. Ends with one line that counts everything.
const root = fileURLToPath(new URL('..', import.meta.url)).replace(/\/$/, '');
const begun = performance.now();
const missingHere = 'not there';
const counts = { passed: 0, failed: 0, skipped: 0 };

/** Without these nothing can be tested. */
const needed = {
  mariadbd: 'mariadb-server-core',
  'mariadb-install-db': 'mariadb-server-core',
  my_print_defaults: 'mariadb-client-core',
};
/** Independent programs that results are checked against; without them their own tests are skipped. */
const oracles = {
  convert: 'imagemagick',
  exiftool: 'libimage-exiftool-perl',
  pdftotext: 'poppler-utils',
};
const pythonModules = { numpy: 'python3-numpy', scipy: 'python3-scipy', cv2: 'python3-opencv' };

function command(args) {
  return new Promise((resolve) => {
    const child = spawn(process.execPath, args, { cwd: root, stdio: 'inherit' });
    child.once('close', resolve);
  });
}

/** A check that either passes or fails as a whole. */
async function check(what, args) {
  const started = performance.now();
  const code = await command(args);
  counts[code === 0 ? 'passed' : 'failed'] += 1;
  console.log(`${seconds(started)}  ${what}: ${code === 0 ? 'passed' : 'FAILED'}`);
}

async function vitest(...projects) {
  const report = join(root, 'var', `tests-${projects.join('-')}.json`);
  mkdirSync(join(root, 'var'), { recursive: true });
  rmSync(report, { force: true });
  const code = await command([
    'node_modules/vitest/vitest.mjs',
    'run',
    ...projects.map((project) => `--project=${project}`),
    '--reporter=dot',
    '--reporter=json',
    `--outputFile.json=${report}`,
  ]);
  const found = existsSync(report) ? JSON.parse(readFileSync(report, 'utf8')) : {};
  const { numPassedTests = 0, numFailedTests = 0, numPendingTests = 0, numTodoTests = 0 } = found;
  counts.passed += numPassedTests;
  // A file that can't even be loaded, or a setup that fails, has no tests to count: it is one failure.
  counts.failed += numFailedTests || (code === 0 ? 0 : 1);
  counts.skipped += numPendingTests + numTodoTests;
}

async function installOracles() {
  const missing = { ...oracles };
  for (const [module, name] of Object.entries(pythonModules)) {
    const there = await run('/usr/bin/python3', ['-c', `import ${module}`]).then(
      () => true,
      () => false,
    );
    // A command of this name does not exist, so the package counts as missing.
    if (!there) missing[`no-command-${name}`] = name;
  }
  return optional(missing);
}

/** Without root what is missing stays missing: its tests are skipped, and counted as such. */
function optional(commands) {
  return installDebian(commands).catch((error) => {
    console.log(`Some tests will be skipped. ${error.message}`);
    return missingHere;
  });
}

async function main() {
  await step('Packages from npm', () => installPackages(root));
  await step('MariaDB', () => installDebian(needed));
  const browser = await step('Chromium', () => optional({ chromium: 'chromium' }));
  await step('Programs to check against', installOracles);
  await check('Lint and format', ['node_modules/@biomejs/biome/bin/biome', 'check']);
  await check('Types', ['node_modules/typescript/bin/tsc', '-p', '.']);
  await check('Types of analysis/, alone', ['node_modules/typescript/bin/tsc', '-p', 'analysis']);
  const { buildIfStale } = await import('./lib/built.mjs');
  await step('Build', () => buildIfStale(root));
  await vitest('unit', 'db');
  if (browser !== missingHere) await vitest('e2e');
  else counts.skipped += readdirSync(join(root, 'tests/e2e')).filter(isTest).length;
}

const isTest = (name) => name.endsWith('.test.ts');

function report() {
  const { passed, failed, skipped } = counts;
  console.log(`\n${seconds(begun)}  in all`);
  console.log(`${passed} passed, ${failed} failed${skipped > 0 ? `, ${skipped} skipped` : ''}`);
  process.exitCode = failed === 0 ? 0 : 1;
}

main()
  .catch((error) => {
    console.error(error.message);
    counts.failed += 1;
  })
  .then(report);
