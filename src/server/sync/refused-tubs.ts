import { sql } from 'kysely';
import type { Operation } from '#contract/operation.ts';
import type { ShopTransaction } from '#server/db/in-shop.ts';

/** Ids of the tubs and of the batch that begin with an operation. */
export function bornWith({ type, body }: Operation): string[] {
  if (type === 'batch-mixed') return [body.batchId, ...body.filled.map((tub) => tub.bucketId)];
  return type === 'bucket-adopted' ? [body.bucketId] : [];
}

/** Those of the tubs and batches that would have begun with an entry that lies in quarantine: they do not come any more. */
export async function findRefused(
  trx: ShopTransaction,
  shopId: string,
  ids: readonly string[],
): Promise<ReadonlySet<string>> {
  if (ids.length === 0) return new Set();
  const { rows } = await sql<{ id: string }>`
    select asked.id
    from unnest(${ids}::text[]) as asked (id)
    where exists (
      select from quarantine q
      where q.shop_id = ${shopId} and (
        q.raw @> jsonb_build_object('type', 'bucket-adopted', 'body', jsonb_build_object('bucketId', asked.id))
        or q.raw @> jsonb_build_object('type', 'batch-mixed', 'body', jsonb_build_object('batchId', asked.id))
        or q.raw @> jsonb_build_object('type', 'batch-mixed', 'body',
          jsonb_build_object('filled', jsonb_build_array(jsonb_build_object('bucketId', asked.id))))))`.execute(trx);
  return new Set(rows.map(({ id }) => id));
}
