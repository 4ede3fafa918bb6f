import { sql } from 'kysely';
import type { Operation } from '#contract/operation.ts';
import type { ShopTransaction } from '#server/db/in-shop.ts';

/** What others wait for when a batch is not released yet. */
export const releaseOf = (batchId: string) => `release of ${batchId}`;

/** What begins with an operation: tubs and a batch by their ids, or the release of a batch. */
export function bornWith({ type, body }: Operation): string[] {
  if (type === 'batch-mixed') return [body.batchId, ...body.filled.map((tub) => tub.bucketId)];
  if (type === 'batch-released') return [releaseOf(body.batchId)];
  return type === 'bucket-adopted' ? [body.bucketId] : [];
}

/** What would have begun with an entry that lies in quarantine: it does not come any more. @param asked as `bornWith` names it */
export async function findRefused(
  trx: ShopTransaction,
  shopId: string,
  asked: readonly string[],
): Promise<ReadonlySet<string>> {
  if (asked.length === 0) return new Set();
  const { rows } = await sql<{ id: string }>`
    select asked.id
    from unnest(${asked}::text[]) as asked (id)
    where exists (
      select from quarantine q
      where q.shop_id = ${shopId} and (
        q.raw @> jsonb_build_object('type', 'bucket-adopted', 'body', jsonb_build_object('bucketId', asked.id))
        or q.raw @> jsonb_build_object('type', 'batch-mixed', 'body', jsonb_build_object('batchId', asked.id))
        or q.raw ->> 'type' = 'batch-released' and asked.id = ${releaseOf('')} || (q.raw -> 'body' ->> 'batchId')
        or q.raw @> jsonb_build_object('type', 'batch-mixed', 'body',
          jsonb_build_object('filled', jsonb_build_array(jsonb_build_object('bucketId', asked.id))))))`.execute(trx);
  return new Set(rows.map(({ id }) => id));
}
