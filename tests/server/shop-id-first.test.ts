import { sql } from 'kysely';
import pg from 'pg';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { pullChanges } from '#server/sync/pull-changes.ts';
import {
  aBatch,
  closePushStation,
  db,
  now,
  openPushStation,
  push,
  record,
  shopId,
} from '#tests/support/push-station.ts';

/** What every statement sent to PostgreSQL says, as the driver sends it. */
const statements: string[] = [];
const send = pg.Client.prototype.query;

beforeAll(async () => {
  await openPushStation();
  pg.Client.prototype.query = function (this: pg.Client, ...words: unknown[]) {
    const [first] = words;
    statements.push(typeof first === 'string' ? first : ((first as { text?: string }).text ?? ''));
    return (send as (...args: unknown[]) => unknown).apply(this, words);
  } as typeof send;
}, 120_000);
afterAll(async () => {
  pg.Client.prototype.query = send;
  await closePushStation();
});

/** Tables that are there before a shop is known, or that no shop owns. */
const WITHOUT_SHOP = ['identities', 'kysely_migration', 'kysely_migration_lock', 'sessions', 'shops'];

interface Key {
  table: string;
  kind: 'p' | 'f' | 'u';
  columns: string[];
  to: string | null;
}

async function readKeys(): Promise<Key[]> {
  const { rows } = await sql<Key>`
    select c.conrelid::regclass::text as "table", c.contype as kind, c.confrelid::regclass::text as "to",
      array(select a.attname::text from unnest(c.conkey) with ordinality k(n, place)
        join pg_attribute a on a.attrelid = c.conrelid and a.attnum = k.n order by k.place) as columns
    from pg_constraint c join pg_namespace s on s.oid = c.connamespace
    where s.nspname = 'public' and c.contype in ('p', 'f', 'u')`.execute(db);
  return rows.map((row) => ({ ...row, to: row.kind === 'f' ? row.to : null }));
}

async function tablesOfShops(): Promise<string[]> {
  const { rows } = await sql<{ name: string }>`
    select c.relname as name from pg_class c join pg_namespace s on s.oid = c.relnamespace
    where s.nspname = 'public' and c.relkind in ('r', 'p')`.execute(db);
  return rows.map(({ name }) => name).filter((name) => !WITHOUT_SHOP.includes(name));
}

describe("every table of a shop's rows can be distributed by shop_id", () => {
  test('it comes first in every primary, unique and foreign key', async () => {
    const [tables, keys] = [await tablesOfShops(), await readKeys()];
    expect(tables.length).toBeGreaterThan(25);
    const wrong = tables.flatMap((table) => {
      const own = keys.filter((key) => key.table === table && key.to !== 'shops' && key.to !== 'identities');
      const late = own.filter(({ columns }) => columns[0] !== 'shop_id');
      return own.some(({ kind }) => kind === 'p') ? late : [...late, { table, kind: 'no primary key' }];
    });
    expect(wrong).toEqual([]);
  });

  test('it comes first in every index that decides what is unique', async () => {
    const { rows } = await sql<{ index: string; first: string; table: string }>`
      select i.indexrelid::regclass::text as index, i.indrelid::regclass::text as "table", a.attname::text as first
      from pg_index i join pg_class c on c.oid = i.indrelid join pg_namespace s on s.oid = c.relnamespace
      join pg_attribute a on a.attrelid = i.indrelid and a.attnum = i.indkey[0]
      where s.nspname = 'public' and i.indisunique`.execute(db);
    const tables = new Set(await tablesOfShops());
    expect(rows.filter(({ table, first }) => tables.has(table) && first !== 'shop_id')).toEqual([]);
  });
});

test('every statement of a push and a pull names the shop of the rows that it touches', async () => {
  const tables = await tablesOfShops();
  statements.length = 0;
  const [batch, bad] = [record(await aBatch(), 'mixer'), { ...record(await aBatch(), 'mixer'), body: {} }];
  statements.length = 0;
  const results = await push([batch, bad, batch]);
  expect(results.map(({ outcome }) => outcome)).toEqual(['accepted', 'rejected', 'duplicate']);
  await pullChanges(db, shopId, { cursor: '', limit: 500, installId: batch.installId, now });
  const touching = statements.filter((text) =>
    tables.some((table) => new RegExp(`(from|into|update|join) "?${table}"?\\b`, 'i').test(text)),
  );
  expect(touching.length).toBeGreaterThan(20);
  expect(touching.filter((text) => !text.includes('shop_id'))).toEqual([]);
});

test('a push of fifty takes no more statements than one of five: one a table', async () => {
  const countOf = async (count: number) => {
    const ops = [];
    for (let n = 0; n < count; n++) ops.push(record(await aBatch(), 'mixer'));
    statements.length = 0;
    expect((await push(ops)).every(({ outcome }) => outcome === 'accepted')).toBe(true);
    return statements.length;
  };
  const five = await countOf(5);
  expect(await countOf(50)).toBe(five);
  expect(five).toBeLessThan(40);
});
