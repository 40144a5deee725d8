import { createHash } from 'node:crypto';
import { existsSync, mkdirSync, readdirSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { run } from './processes.mjs';

const folders = ['app', 'components', 'lib', 'analysis', 'models', 'public'];
const files = [
  'instrumentation.ts',
  'proxy.ts',
  'next.config.mjs',
  'postcss.config.mjs',
  'tailwind.config.ts',
  'tsconfig.json',
  'package-lock.json',
  'scripts/build.mjs',
];
const stamp = '.next/mendlight-sources';

/** Builds unless the last build was made from just these sources. */
export async function buildIfStale(root) {
  const hash = hashOfSources(root);
  const file = join(root, stamp);
  if (existsSync(file) && readFileSync(file, 'utf8') === hash) return 'sources unchanged';
  await run(process.execPath, ['scripts/build.mjs'], {
    cwd: root,
    env: { ...process.env, NODE_ENV: 'production' },
  });
  mkdirSync(join(root, '.next'), { recursive: true });
  writeFileSync(file, hash);
  return 'built anew';
}

function hashOfSources(root) {
  const hash = createHash('sha256');
  const names = folders.flatMap((folder) =>
    readdirSync(join(root, folder), { recursive: true, withFileTypes: true })
      .filter((entry) => entry.isFile())
      .map((entry) => join(entry.parentPath, entry.name)),
  );
  for (const file of files) if (existsSync(join(root, file))) names.push(join(root, file));
  for (const name of names.sort()) {
    hash.update(`${name.slice(root.length)}\0`);
    hash.update(createHash('sha256').update(readFileSync(name)).digest());
  }
  return hash.digest('hex');
}
