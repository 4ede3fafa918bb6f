import { type SqlBool, sql } from 'kysely';
import type { PullResponse } from '#contract/pull.ts';
import { PROTOCOL } from '#contract/push.ts';
import { type TableName, tableNames } from '#contract/rows.ts';
import type { Database } from '#server/db/connection.ts';
import { type ShopTransaction, inShop } from '#server/db/in-shop.ts';
import { HttpProblem } from '#server/http/http-problem.ts';
import { type Cursor, cursorAfter, cursorAt, parseCursor } from './pull-cursor.ts';
import { pullTables } from './pull-rows.ts';

interface Request {
  cursor: string;
  limit: number;
  installId: string | undefined;
  now: Date;
}

interface Change {
  table: TableName;
  id: string;
  seq: number;
  deleted: boolean;
  row: Record<string, unknown>;
}

/** One page of rows and tombstones after the cursor, from one snapshot. @throws HttpProblem 409 'must-refetch' */
export function pullChanges(db: Database, shopId: string, request: Request): Promise<PullResponse> {
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
      const found = await findChanges(trx, shopId, cursor, request.limit);
      const more = found.length > request.limit;
      const page = found.slice(0, request.limit);
      const last = page.at(-1);
      const seq = more && last !== undefined ? last.seq - 1 : shop.seq;
      return {
        protocol: PROTOCOL,
        serverTime: request.now.toISOString(),
        cursor:
          more && last !== undefined
            ? cursorAt(shop.epoch, last.seq, last.table, last.id)
            : cursorAfter(shop.epoch, shop.seq),
        seq,
        more,
        remaining: request.cursor === '' ? (await countRows(trx, shopId)) - page.length : null,
        changes: page.map(({ table, id, deleted, row }) =>
          deleted ? { table, id, deleted: true as const } : { table, id, row: { id, ...row } },
        ),
        own: await ownOperations(trx, shopId, request.installId, cursor.seq, seq),
      };
    },
    { snapshot: true },
  );
}

async function findChanges(trx: ShopTransaction, shopId: string, cursor: Cursor, limit: number): Promise<Change[]> {
  const all: Change[] = [];
  for (const [index, table] of tableNames.entries())
    all.push(...(await changesOf(trx, shopId, cursor, index, table, limit + 1)));
  const order = (change: Change) => tableNames.indexOf(change.table);
  return all.sort((a, b) => a.seq - b.seq || order(a) - order(b) || (a.id < b.id ? -1 : 1)).slice(0, limit + 1);
}

async function changesOf(
  trx: ShopTransaction,
  shopId: string,
  cursor: Cursor,
  index: number,
  name: TableName,
  limit: number,
): Promise<Change[]> {
  const { table, row } = pullTables[name];
  const shop = name === 'shop' ? sql.ref('t.id') : sql.ref('t.shop_id');
  const result = await sql<{ id: string; seq: number; deleted: boolean; row: Record<string, unknown> }>`
    select t.id, t.change_seq as seq, t.deleted_at is not null as deleted, ${row} as row
    from ${sql.table(table)} t
    where ${shop} = ${shopId} and ${after(cursor, index)}
    order by t.change_seq, t.id
    limit ${limit}`.execute(trx);
  return result.rows.map((found) => ({ table: name, ...found }));
}

function after(cursor: Cursor, index: number) {
  if (index > cursor.table) return sql<SqlBool>`t.change_seq >= ${cursor.seq}`;
  if (index < cursor.table) return sql<SqlBool>`t.change_seq > ${cursor.seq}`;
  return sql<SqlBool>`(t.change_seq, t.id) > (${cursor.seq}, ${cursor.id}::uuid)`;
}

async function countRows(trx: ShopTransaction, shopId: string): Promise<number> {
  let total = 0;
  for (const name of tableNames) {
    const shop = name === 'shop' ? sql.ref('id') : sql.ref('shop_id');
    const result = await sql<{
      count: number;
    }>`select count(*) as count from ${sql.table(pullTables[name].table)} where ${shop} = ${shopId}`.execute(trx);
    total += Number(result.rows[0]?.count ?? 0);
  }
  return total;
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
