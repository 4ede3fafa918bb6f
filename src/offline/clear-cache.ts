import { tableNames } from '#contract/rows.ts';
import type { Cache } from './cache.ts';

/** The rows only: what was recorded here is never thrown away. */
export async function clearCache(cache: Cache): Promise<void> {
  const tables = tableNames.map((name) => cache.rows(name));
  await cache.transaction('rw', [...tables, cache.meta], async () => {
    for (const table of tables) await table.clear();
    await cache.meta.clear();
  });
}
