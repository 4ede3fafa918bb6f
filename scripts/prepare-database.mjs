import fs from 'node:fs';
import path from 'node:path';
import { withClient } from './databases.mjs';
import { projectFolder } from './paths.mjs';
import { runStep } from './run-step.mjs';
import { say } from './say.mjs';

/** @typedef {import('./databases.mjs').DatabaseUrls} DatabaseUrls */

/** @param {DatabaseUrls} urls */
export async function migrateDatabase({ ownerUrl }) {
  const env = { MIGRATE_DATABASE_URL: ownerUrl };
  await runStep('The migration', ['--import', 'tsx', 'scripts/migrate.ts'], { env, quiet: true });
}

/** Fills a database that has no shop with the demo shops. @param {DatabaseUrls} urls */
export async function seedWhenEmpty({ ownerUrl, appUrl }) {
  if (await hasPeople(ownerUrl)) return;
  if (!fs.existsSync(path.join(projectFolder, 'scripts/seed.ts')))
    return say('No demo shop yet: scripts/seed.ts is missing.');
  say('Filling the demo shop …');
  const env = { MIGRATE_DATABASE_URL: ownerUrl, DATABASE_URL: appUrl };
  await runStep('Filling the demo shop', ['--import', 'tsx', 'scripts/seed.ts'], { env, quiet: true });
}

/** Identities are the one table outside the shops, so the owner can ask without naming a shop. @param {string} ownerUrl */
async function hasPeople(ownerUrl) {
  return withClient(ownerUrl, async (client) => {
    const known = await client.query("select to_regclass('public.identities') as name");
    if (known.rows[0]?.name === null) return false;
    const { rows } = await client.query('select exists (select from identities) as any');
    return rows[0]?.any === true;
  });
}
