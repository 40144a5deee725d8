import { fileURLToPath } from 'node:url';
import { defineConfig } from 'vitest/config';

const root = fileURLToPath(new URL('.', import.meta.url));

// `unit` needs nothing running; `db` gets a throwaway MariaDB and the fakes; `e2e` the built product on a free port.
export default defineConfig({
  resolve: {
    alias: { '@': root, 'server-only': fileURLToPath(new URL('tests/empty.ts', import.meta.url)) },
  },
  test: {
    testTimeout: 60_000,
    projects: [
      {
        extends: true,
        test: {
          name: 'unit',
          include: ['tests/**/*.test.ts', 'tests/**/*.test.tsx'],
          exclude: ['tests/db/**', 'tests/e2e/**'],
        },
      },
      {
        extends: true,
        test: {
          name: 'db',
          include: ['tests/db/**/*.test.ts'],
          globalSetup: ['tests/db/setup.ts'],
          setupFiles: ['tests/db/environment.ts'],
          fileParallelism: false,
        },
      },
      {
        extends: true,
        test: {
          name: 'e2e',
          include: ['tests/e2e/**/*.test.ts'],
          globalSetup: ['tests/e2e/setup.ts'],
          fileParallelism: false,
          testTimeout: 600_000,
          hookTimeout: 180_000,
        },
      },
    ],
  },
});
