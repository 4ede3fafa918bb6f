import pg from 'pg';
import { tableNames } from '#contract/rows.ts';
import { pullTables } from '#server/sync/pull-rows.ts';

/** What a superuser finds of one shop: the ids of all that stations pull, and of its operations. */
export async function idsOfShop(
  superuserUrl: string,
  shopId: string,
): Promise<{ rows: Set<string>; operations: Set<string> }> {
  const client = new pg.Client({ connectionString: superuserUrl });
  await client.connect();
  const read = async (table: string, id: string) => {
    const shop = table === 'shops' ? 'id' : 'shop_id';
    const names = [id, table, shop].map((name) => client.escapeIdentifier(name));
    const { rows } = await client.query<{ id: string }>(
      `select ${names[0]}::text as id from ${names[1]} where ${names[2]} = $1`,
      [shopId],
    );
    return rows.map((row) => row.id);
  };
  const rows = new Set<string>();
  for (const name of tableNames) for (const id of await read(pullTables[name].table, 'id')) rows.add(id);
  const operations = new Set(await read('operations', 'op_id'));
  await client.end();
  return { rows, operations };
}
