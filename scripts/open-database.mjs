import { enterCluster } from './cluster.mjs';
import { databaseUrls, ensureDatabase, ensureRoles, roles, superuserUrl, withClient } from './databases.mjs';
import { StartError } from './say.mjs';

/** @typedef {import('./databases.mjs').DatabaseUrls & { close: () => Promise<void> }} OpenDatabase */

/**
 * The database of DATABASE_URL when it is given, else one in the private cluster, which `close` leaves again.
 * @param {import('./read-settings.mjs').Settings} settings
 * @returns {Promise<OpenDatabase>}
 */
export async function openDatabase({ DATABASE_URL, MIGRATE_DATABASE_URL }) {
  if (DATABASE_URL !== undefined && MIGRATE_DATABASE_URL !== undefined) {
    await requireSafeRole(DATABASE_URL);
    return { ownerUrl: MIGRATE_DATABASE_URL, appUrl: DATABASE_URL, close: async () => {} };
  }
  const cluster = await enterCluster('pg');
  try {
    await ensureRoles(superuserUrl(cluster), cluster.passwords);
    await ensureDatabase(superuserUrl(cluster), 'halfpail');
  } catch (error) {
    await cluster.leave();
    throw error;
  }
  return { ...databaseUrls(cluster, 'halfpail'), close: cluster.leave };
}

/** A role that passes row level security would show each shop the others' rows. @param {string} appUrl */
async function requireSafeRole(appUrl) {
  await withClient(appUrl, async (client) => {
    const { rows } = await client.query(
      'select rolname, rolsuper or rolbypassrls as unsafe from pg_roles where rolname = current_user',
    );
    if (rows[0]?.unsafe)
      throw new StartError(
        `The role of DATABASE_URL (${rows[0].rolname}) passes row level security: give the application's role, ${roles.app}.`,
      );
    const known = await client.query('select 1 from pg_roles where rolname = $1', [roles.app]);
    if (!known.rowCount)
      throw new StartError(
        `The role ${roles.app} is missing in that database server: create it, the migrations grant to it by name.`,
      );
  });
}
