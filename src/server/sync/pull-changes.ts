import { type SqlBool, sql } from 'kysely';
import type { PullResponse } from '#contract/pull.ts';
import { PROTOCOL } from '#contract/push.ts';
import { tableNames } from '#contract/rows.ts';
import type { Database } from '#server/db/connection.ts';
import { type ShopTransaction, inShop } from '#server/db/in-shop.ts';
import { HttpProblem } from '#server/http/http-problem.ts';
import type { PageStore, StoredPage } from './page-store.ts';
import { type Cursor, cursorAfter, cursorAt, parseCursor } from './pull-cursor.ts';
import { pullTables } from './pull-rows.ts';
import { type ChangeKey, readChanges } from './read-changes.ts';

/** Rows of a page that others may ask for again; a short one is read as fast as it is found. */
const WORTH_KEEPING = 200;

interface Request {
  cursor: string;
  limit: number;
  installId: string | undefined;
  now: Date;
}

/** The page of `pullPage`, read. */
export async function pullChanges(db: Database, shopId: string, request: Request): Promise<PullResponse> {
  return JSON.parse(await pullPage(db, shopId, request)) as PullResponse;
}

/**
 * One page of rows and tombstones after the cursor, from one snapshot, as the JSON text of a pull response: PostgreSQL
 * writes the rows, and nothing reads them again on their way.
 * @throws HttpProblem 409 'must-refetch'
 */
export function pullPage(db: Database, shopId: string, request: Request, store?: PageStore): Promise<string> {
  const cursor = parseCursor(request.cursor);
  return inShop(
    db,
    shopId,
    async (trx) => {
      const shop = await trx
        .selectFrom('shopSync')
        .select(['epoch', 'seq'])
        .where('shopId', '=', shopId)
        .executeTakeFirstOrThrow();
      if (cursor.seq > shop.seq || (cursor.epoch !== null && cursor.epoch !== shop.epoch)) {
        throw new HttpProblem(409, 'must-refetch', 'Load again', 'This device loads the shop again.');
      }
      const key = [shopId, shop.epoch, shop.seq, request.cursor, request.limit].join(' ');
      const page = store?.find(key) ?? (await readPage(trx, shopId, cursor, request.limit));
      if (page.count >= WORTH_KEEPING) store?.keep(key, page);
      const { last } = page;
      const seq = last === undefined ? shop.seq : last.seq - 1;
      const head = {
        protocol: PROTOCOL,
        serverTime: request.now.toISOString(),
        cursor: last === undefined ? cursorAfter(shop.epoch, shop.seq) : cursorAt(shop.epoch, last),
        seq,
        more: last !== undefined,
        remaining: request.cursor === '' ? (await countRows(trx, shopId)) - page.count : null,
        own: await ownOperations(trx, shopId, request.installId, cursor.seq, seq),
      };
      return `${JSON.stringify(head).slice(0, -1)},"changes":[${page.changes}]}`;
    },
    { snapshot: true },
  );
}

/** `last` is where the next page goes on, when there is one. */
async function readPage(trx: ShopTransaction, shopId: string, cursor: Cursor, limit: number): Promise<StoredPage> {
  const found = await findKeys(trx, shopId, cursor, limit + 1);
  const page = found.slice(0, limit);
  const changes = await readChanges(trx, shopId, page);
  const last = found.length > page.length ? page.at(-1) : undefined;
  return { changes: changes.join(','), last, count: page.length };
}

/** The next changes of all tables in the order of (change sequence, table, id), from the indexes alone. */
async function findKeys(trx: ShopTransaction, shopId: string, cursor: Cursor, limit: number): Promise<ChangeKey[]> {
  const ofTables = tableNames.map((name, place) => {
    const { table } = pullTables[name];
    const shop = name === 'shop' ? sql.ref('t.id') : sql.ref('t.shop_id');
    return sql`(select ${sql.lit(place)} as place, t.id, t.change_seq as seq from ${sql.table(table)} t
      where ${shop} = ${shopId} and ${after(cursor, place)} order by t.change_seq, t.id limit ${limit})`;
  });
  const found = await sql<ChangeKey>`
    select place, id, seq from (${sql.join(ofTables, sql` union all `)}) k
    order by seq, place, id limit ${limit}`.execute(trx);
  return found.rows;
}

function after(cursor: Cursor, place: number) {
  if (place > cursor.table) return sql<SqlBool>`t.change_seq >= ${cursor.seq}`;
  if (place < cursor.table) return sql<SqlBool>`t.change_seq > ${cursor.seq}`;
  return sql<SqlBool>`(t.change_seq, t.id) > (${cursor.seq}, ${cursor.id}::uuid)`;
}

async function countRows(trx: ShopTransaction, shopId: string): Promise<number> {
  const counts = tableNames.map((name) => {
    const shop = name === 'shop' ? sql.ref('id') : sql.ref('shop_id');
    return sql`(select count(*) from ${sql.table(pullTables[name].table)} where ${shop} = ${shopId})`;
  });
  const result = await sql<{ count: number }>`select ${sql.join(counts, sql` + `)} as count`.execute(trx);
  return Number(result.rows[0]?.count ?? Number.NaN);
}

/** This install's operations that the rows up to `seq` contain. */
async function ownOperations(
  trx: ShopTransaction,
  shopId: string,
  installId: string | undefined,
  from: number,
  seq: number,
) {
  if (installId === undefined) return [];
  return trx
    .selectFrom('operations')
    .select(['opId', 'changeSeq'])
    .where('shopId', '=', shopId)
    .where('installId', '=', installId)
    .where('changeSeq', '>=', from)
    .where('changeSeq', '<=', seq)
    .execute();
}
