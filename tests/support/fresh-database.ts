import { randomBytes } from 'node:crypto';
import { inject } from 'vitest';
import { dropDatabase, ensureDatabase } from '#scripts/databases.mjs';
import type { TestDatabase } from './postgres.ts';

/** A migrated, empty database of one test file, for tests that must not meet another file's rows. */
export async function makeFreshDatabase(): Promise<TestDatabase & { drop: () => Promise<void> }> {
  const name = `${inject('template')}_${randomBytes(4).toString('hex')}`;
  await ensureDatabase(inject('clusterUrl'), name, inject('template'));
  return {
    ownerUrl: withDatabase(inject('ownerUrl'), name),
    appUrl: withDatabase(inject('appUrl'), name),
    drop: () => dropDatabase(inject('clusterUrl'), name),
  };
}

function withDatabase(url: string, name: string): string {
  return Object.assign(new URL(url), { pathname: `/${name}` }).href;
}
