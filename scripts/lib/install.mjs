import { existsSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { has, run, withSystemPath } from './processes.mjs';

/** Installs the npm packages of the lock file when any is missing or of another version. */
export async function installPackages(root) {
  if (!packagesStale(root)) return 'there already';
  await run('npm', ['ci', '--include=dev', '--no-audit', '--no-fund', '--loglevel=error'], {
    cwd: root,
  }).catch((error) => {
    throw new Error(
      `${error.message}\nThe packages of package-lock.json could not be installed. Check that the npm registry can be reached, then start again.`,
    );
  });
  return 'installed from package-lock.json';
}

function packagesStale(root) {
  const installed = join(root, 'node_modules/.package-lock.json');
  if (!existsSync(installed)) return true;
  const wanted = JSON.parse(readFileSync(join(root, 'package-lock.json'), 'utf8')).packages;
  const have = JSON.parse(readFileSync(installed, 'utf8')).packages;
  return Object.entries(wanted).some(
    ([path, { version, optional }]) => path !== '' && !optional && have[path]?.version !== version,
  );
}

/**
 * Installs Debian packages whose commands are missing.
 * @param {Record<string, string>} needed command → package
 */
export async function installDebian(needed) {
  const missing = [];
  for (const [command, name] of Object.entries(needed)) {
    if (!(await has(command))) missing.push(name);
  }
  if (missing.length === 0) return 'there already';
  const names = [...new Set(missing)];
  const asRoot = await rootPrefix();
  const byHand = `apt-get install ${names.join(' ')}`;
  if (asRoot === null || !(await has('apt-get'))) {
    throw new Error(`Missing: ${names.join(', ')}. Install by hand, as root: ${byHand}`);
  }
  const env = withSystemPath({ DEBIAN_FRONTEND: 'noninteractive' });
  const apt = (...args) => {
    const [command, ...rest] = [
      ...asRoot,
      'apt-get',
      '-q',
      '-o',
      'DPkg::Lock::Timeout=600',
      ...args,
    ];
    return run(command, rest, { env });
  };
  const install = () => apt('install', '-y', '--no-install-recommends', ...names);
  try {
    // The package lists may be missing or stale: then they are fetched, and the second try counts.
    await install().catch(() => apt('update').then(install));
  } catch (error) {
    throw new Error(
      `${error.message}\nDebian's packages could not be installed. By hand, as root: ${byHand}`,
    );
  }
  return `installed ${names.join(', ')}`;
}

/** What to put before a command that needs root, or null. */
async function rootPrefix() {
  if (process.getuid?.() === 0) return [];
  const quiet = await run('sudo', ['-n', 'true']).then(
    () => true,
    () => false,
  );
  return quiet ? ['sudo', '-n'] : null;
}
