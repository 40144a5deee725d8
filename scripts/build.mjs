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

const next = spawnSync(process.execPath, ['node_modules/next/dist/bin/next', 'build'], {
  cwd: root,
  env,
  stdio: 'inherit',
});
process.exitCode = next.status ?? 1;
