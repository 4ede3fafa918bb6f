import { withClient } from './databases.mjs';

/**
 * Says that a database was restored from a backup: every station loads its shop again and sends once more what it sent
 * in the last fourteen days, which the server takes once.
 * @param {string} ownerUrl
 * @returns {Promise<number>} shops
 */
export async function startNewEpoch(ownerUrl) {
  return withClient(ownerUrl, async (client) => {
    await client.query('begin');
    // The owner is held by row level security as well; here it acts for all shops at once.
    await client.query('alter table shop_sync no force row level security');
    const { rowCount } = await client.query('update shop_sync set epoch = gen_random_uuid()');
    await client.query('alter table shop_sync force row level security');
    await client.query('commit');
    return rowCount ?? 0;
  });
}
