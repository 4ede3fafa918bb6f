import { existsSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { defineConfig } from 'vitest/config';

const root = fileURLToPath(new URL('..', import.meta.url));
const unit = {
  name: 'unit',
  include: ['src/**/*.test.{ts,tsx}', 'tests/reference/**/*.test.ts', 'tests/maths/**/*.test.ts'],
  setupFiles: ['fake-indexeddb/auto'],
  // Generous: a loaded machine is no failure.
  testTimeout: 120_000,
};
const lint = {
  name: 'lint',
  include: ['tests/lint/**/*.test.ts', 'tests/scripts/**/*.test.ts'],
  testTimeout: 60_000,
  hookTimeout: 120_000,
};
const onPostgres = {
  globalSetup: ['tests/support/postgres-setup.ts'],
  testTimeout: 30_000,
  hookTimeout: 60_000,
};
const server = { ...onPostgres, name: 'server', include: ['tests/server/**/*.test.ts'] };
const sync = {
  ...onPostgres,
  name: 'sync',
  include: ['tests/sync/**/*.test.ts'],
  setupFiles: ['fake-indexeddb/auto'],
  testTimeout: 180_000,
};
const e2e = {
  name: 'e2e',
  include: ['tests/e2e/**/*.test.ts'],
  globalSetup: ['tests/e2e/global-setup.ts'],
  testTimeout: 180_000,
  hookTimeout: 120_000,
  fileParallelism: false,
};
/** Several server processes behind nginx and PgBouncer, each file on a cluster of its own. */
const copies = {
  name: 'copies',
  include: ['tests/copies/**/*.test.ts'],
  globalSetup: ['tests/copies/global-setup.ts'],
  testTimeout: 180_000,
  hookTimeout: 180_000,
  fileParallelism: false,
};

const projects = [unit, lint, server, ...(existsSync(`${root}/tests/sync`) ? [sync] : []), e2e, copies];

export default defineConfig({
  root,
  test: {
    root,
    projects: projects.map((test) => ({ root, test: { ...test, environment: 'node' as const } })),
  },
});
