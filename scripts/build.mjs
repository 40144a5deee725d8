import { spawnSync } from 'node:child_process';
import { fileURLToPath } from 'node:url';
import { build } from 'esbuild';

const root = fileURLToPath(new URL('..', import.meta.url));
const env = { ...process.env, NODE_ENV: 'production', NEXT_TELEMETRY_DISABLED: '1' };

// What the worker threads run: one file each, packages left where they are.
await build({
  absWorkingDir: root,
  entryPoints: ['lib/server/worker/analyse-shot.ts'],
  outdir: 'dist/worker',
  outExtension: { '.js': '.mjs' },
  bundle: true,
  platform: 'node',
  target: 'node20',
  format: 'esm',
  packages: 'external',
  alias: { '@': root },
  sourcemap: true,
  logLevel: 'warning',
});

// The report's style sheet is inlined into a page that needs no JavaScript, so it is built on its own.
run('node_modules/@tailwindcss/cli/dist/index.mjs', [
  '-i',
  'components/report/report.css',
  '-o',
  'dist/report.css',
  '--minify',
]);
run('node_modules/next/dist/bin/next', ['build']);

function run(script, args) {
  const { status } = spawnSync(process.execPath, [script, ...args], {
    cwd: root,
    env,
    stdio: 'inherit',
  });
  if (status !== 0) process.exit(status ?? 1);
}
