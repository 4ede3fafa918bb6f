import pg from 'pg';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { type Database, openDatabase } from '#server/db/connection.ts';
import { inShop } from '#server/db/in-shop.ts';
import { pullChanges } from '#server/sync/pull-changes.ts';
import { seedDemo } from '#scripts/seed/seed-demo.ts';
import { makeFreshDatabase } from '#tests/support/fresh-database.ts';

let fresh: Awaited<ReturnType<typeof makeFreshDatabase>>;
let app: Database;
let bare: pg.Client;
let shops: string[];
let tables: string[];

beforeAll(async () => {
  fresh = await makeFreshDatabase();
  const today = new Date('2026-11-30T00:00:00Z');
  await seedDemo({ ownerUrl: fresh.ownerUrl, appUrl: fresh.appUrl, today });
  app = openDatabase(fresh.appUrl, 2);
  bare = new pg.Client({ connectionString: fresh.appUrl });
  await bare.connect();
  const found = await bare.query<{ shop_id: string }>(
    `select shop_id from find_sign_in('mixer@siltlane.example.test') union all
     select shop_id from find_sign_in('mixer@gorsegate.example.test')`,
  );
  shops = found.rows.map((row) => row.shop_id);
  const named = await bare.query<{ table_name: string }>(
    `select table_name from information_schema.columns where column_name = 'shop_id' and table_schema = 'public'`,
  );
  tables = named.rows.map((row) => row.table_name);
}, 120_000);
afterAll(async () => {
  await bare.end();
  await app.destroy();
  await fresh.drop();
});

describe('two shops in one database', () => {
  test('the application sees no row of any shop table outside a shop', async () => {
    expect(tables.length).toBeGreaterThan(25);
    for (const table of [...tables, 'shops']) {
      const { rows } = await bare.query(`select count(*)::int as n from ${pg.escapeIdentifier(table)}`);
      expect({ table, n: rows[0].n }).toEqual({ table, n: 0 });
    }
  });

  test('the second shop pulls only its own few rows', async () => {
    const request = { cursor: '', limit: 2000, installId: undefined, now: new Date() };
    const [first, second] = await Promise.all(shops.map((shop) => pullChanges(app, shop, request)));
    const ids = (page: typeof first) => new Set(page?.changes.map((change) => change.id));
    expect(ids(first).size).toBeGreaterThan(600);
    expect(second?.changes.filter((change) => change.table === 'buckets')).toHaveLength(2);
    expect([...ids(second)].filter((id) => ids(first).has(id))).toEqual([]);
  });

  test('the second shop finds nothing by an id of the first', async () => {
    const [first = '', second = ''] = shops;
    const bucket = await inShop(app, first, (trx) => trx.selectFrom('buckets').select('id').executeTakeFirstOrThrow());
    const seen = await inShop(app, second, (trx) =>
      trx.selectFrom('buckets').selectAll().where('id', '=', bucket.id).execute(),
    );
    const changed = await inShop(app, second, (trx) =>
      trx.updateTable('buckets').set({ name: 'taken' }).where('id', '=', bucket.id).returning('id').execute(),
    );
    expect({ seen, changed }).toEqual({ seen: [], changed: [] });
  });

  test('the application is neither owner nor above row level security', async () => {
    const { rows } = await bare.query(
      `select rolsuper, rolbypassrls, exists (select from pg_tables where tableowner = current_user) as owns
       from pg_roles where rolname = current_user`,
    );
    expect(rows).toEqual([{ rolsuper: false, rolbypassrls: false, owns: false }]);
  });

  test('every shop table forces its policy and has the shop first in each key', async () => {
    const { rows } = await bare.query(
      `select c.relname as table, c.relforcerowsecurity as forced,
         (select bool_and((select attname from pg_attribute a where a.attrelid = c.oid and a.attnum = k.conkey[1]) = 'shop_id')
          from pg_constraint k where k.conrelid = c.oid and k.contype in ('p', 'f')
            and k.confrelid <> 'identities'::regclass) as shop_first
       from pg_class c where c.relkind = 'r' and c.relname = any($1)`,
      [tables],
    );
    expect(rows.filter((row) => !row.forced || !row.shop_first)).toEqual([]);
    expect(rows).toHaveLength(tables.length);
  });

  test.each(['operations', 'additions', 'movements', 'lot_movements', 'audit'])(
    '%s cannot be changed or removed by the application',
    async (table) => {
      const name = pg.escapeIdentifier(table);
      await expect(bare.query(`delete from ${name}`)).rejects.toThrow('permission denied');
      await expect(bare.query(`update ${name} set shop_id = shop_id`)).rejects.toThrow('permission denied');
    },
  );

  test('the demo shop counts what it promises, and its books add up', async () => {
    const { rows } = await inShopRaw(
      shops[0] as string,
      `
      select (select count(*) from components)::int as components, (select count(*) from formulas)::int as formulas,
        (select count(*) from buckets)::int as buckets,
        (select count(*) from buckets b where balance_mg <> (select sum(delta_mg) from movements m where m.bucket_id = b.id))::int as wrong,
        (select count(*) from lots where balance_mg < 0)::int as overdrawn,
        (select count(*) from (select 1 from bucket_composition group by bucket_id having sum(ppb) <> 1000000000) s)::int as uneven,
        (select count(distinct child_id) from bucket_parents)::int as blended`,
    );
    expect(rows[0]).toMatchObject({ components: 24, formulas: 400, buckets: 120, wrong: 0, overdrawn: 0, uneven: 0 });
    expect(rows[0].blended).toBeGreaterThan(3);
  });
});

async function inShopRaw(shopId: string, query: string) {
  await bare.query('begin');
  await bare.query(`select set_config('app.shop_id', $1, true)`, [shopId]);
  const result = await bare.query(query);
  await bare.query('commit');
  return result;
}
