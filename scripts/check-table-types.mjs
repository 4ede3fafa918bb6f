import { randomBytes } from 'node:crypto';
import { enterCluster } from './cluster.mjs';
import { databaseUrls, dropDatabase, ensureDatabase, ensureRoles, superuserUrl } from './databases.mjs';
import { migrateDatabase } from './prepare-database.mjs';
import { runNode } from './run-step.mjs';

/** @returns {Promise<boolean>} true when src/server/db/tables.ts is what the migrations make */
export async function checkTableTypes() {
  const cluster = await enterCluster('test-pg', { throwAway: true });
  const admin = superuserUrl(cluster);
  const name = `tables_${randomBytes(4).toString('hex')}`;
  try {
    await ensureRoles(admin, cluster.passwords);
    await ensureDatabase(admin, name);
    const urls = databaseUrls(cluster, name);
    await migrateDatabase(urls);
    const words = ['--import', 'tsx', 'scripts/generate-table-types.ts', '--check'];
    return (await runNode(words, { env: { MIGRATE_DATABASE_URL: urls.ownerUrl } })).code === 0;
  } finally {
    await dropDatabase(admin, name);
    await cluster.leave();
  }
}
