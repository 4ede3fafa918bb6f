import pg from 'pg';
import type { Database } from '#server/db/connection.ts';
import { inShop } from '#server/db/in-shop.ts';
import { pullChanges } from '#server/sync/pull-changes.ts';
import { cursorAfter } from '#server/sync/pull-cursor.ts';

/**
 * Movements of one tub up to `count` in all, entered in bulk by a superuser without the checks of each row: the ledger of
 * years.
 */
export async function fillMovements(superuserUrl: string, shopId: string, count: number): Promise<void> {
  const client = new pg.Client({ connectionString: superuserUrl });
  await client.connect();
  await client.query('set session_replication_role = replica');
  await client.query(
    `insert into movements (shop_id, op_id, n, bucket_id, kind, delta_mg)
     select $1::uuid, m.op_id, 1000 + g, m.bucket_id, 'used', 0
     from (select op_id, bucket_id from movements where shop_id = $1 limit 1) m,
       generate_series((select count(*)::int from movements where shop_id = $1), $2::int) g`,
    [shopId, count],
  );
  await client.query('analyze movements');
  await client.end();
}

interface PullCost {
  rows: number;
  statements: number;
  buffers: number;
  ms: number;
}

/** What PostgreSQL reads for a pull of the last `rows` changes: explain (analyze, buffers) of each of its statements. */
export async function explainPull(db: Database, shopId: string, rows: number): Promise<PullCost> {
  const now = new Date();
  const { cursor } = await pullChanges(db, shopId, { cursor: '', limit: 1, installId: undefined, now });
  const epoch = cursor.split(':')[0];
  const { seq } = await inShop(db, shopId, (trx) =>
    trx
      .selectFrom('buckets')
      .select((eb) => eb.fn.max('changeSeq').as('seq'))
      .where('shopId', '=', shopId)
      .executeTakeFirstOrThrow(),
  );
  const statements: { text: string; values: unknown[] }[] = [];
  const send = pg.Client.prototype.query;
  pg.Client.prototype.query = function (this: pg.Client, ...words: unknown[]) {
    const [text, values] = words;
    if (typeof text === 'string' && /^\s*select/i.test(text))
      statements.push({ text, values: (values as unknown[]) ?? [] });
    return (send as (...args: unknown[]) => unknown).apply(this, words);
  } as typeof send;
  const started = performance.now();
  const page = await pullChanges(db, shopId, {
    cursor: cursorAfter(epoch ?? '', seq - 1),
    limit: rows,
    installId: undefined,
    now,
  });
  const ms = performance.now() - started;
  pg.Client.prototype.query = send;
  const buffers = await inShop(db, shopId, async (trx) => {
    let sum = 0;
    for (const { text, values } of statements.filter(({ text }) => !text.includes('set_config'))) {
      const plan = await trx.executeQuery<Record<string, unknown>>({
        sql: `explain (analyze, buffers, format json) ${text}`,
        parameters: values,
        query: { kind: 'RawNode' } as never,
        queryId: { queryId: '' } as never,
      });
      const top = JSON.stringify(plan.rows[0]);
      const [, hit] = /"sharedHitBlocks\\?":\s*(\d+)/i.exec(top.replaceAll(' ', '')) ?? [];
      const [, read] = /"sharedReadBlocks\\?":\s*(\d+)/i.exec(top.replaceAll(' ', '')) ?? [];
      sum += Number(hit ?? 0) + Number(read ?? 0);
    }
    return sum;
  });
  return { rows: page.changes.length, statements: statements.length, buffers, ms };
}
