import type { Selectable } from 'kysely';
import { needsRecount } from '#domain/needs-recount.ts';
import type { Buckets } from '#server/db/tables.ts';
import { type ApplyContext, RejectedError } from '#server/sync/apply-context.ts';

export type BucketRow = Selectable<Buckets>;

/** @throws RejectedError when the shop has no such tub */
export async function requireBucket({ trx, shopId }: ApplyContext, id: string): Promise<BucketRow> {
  const row = await trx
    .selectFrom('buckets')
    .selectAll()
    .where('shopId', '=', shopId)
    .where('id', '=', id)
    .executeTakeFirst();
  if (row === undefined) throw new RejectedError('no-such-tub', 'There is no such tub in this shop.');
  return row;
}

type MovementKind = 'filled' | 'folded-in' | 'wall-loss' | 'used' | 'recounted' | 'discarded';

interface Movement {
  kind: MovementKind;
  deltaMg: number;
  jobId?: string | null;
}

/**
 * Books movements of one bucket and changes its row: the balance stays the sum of its movements, an over-spend is
 * flagged and never clipped. @returns the number of the next movement of this operation
 */
export async function moveBucket(
  context: ApplyContext,
  bucket: BucketRow,
  movements: readonly Movement[],
  change: Partial<BucketRow>,
  firstN = 1,
): Promise<number> {
  const { trx, shopId, operation, seq } = context;
  const balanceMg = movements.reduce((sum, movement) => sum + movement.deltaMg, bucket.balanceMg);
  const rows = movements.map((movement, index) => ({
    shopId,
    opId: operation.opId,
    n: firstN + index,
    bucketId: bucket.id,
    kind: movement.kind,
    deltaMg: movement.deltaMg,
    jobId: movement.jobId ?? null,
  }));
  if (rows.length > 0) await trx.insertInto('movements').values(rows).execute();
  const known = bucket.seen as Record<string, number>;
  const spend = { installId: operation.installId, seen: operation.seen[bucket.id] ?? {} };
  const { seen: _, lab: __, ...plain } = change;
  await trx
    .updateTable('buckets')
    .set({
      needsRecount: bucket.needsRecount || needsRecount(balanceMg, known, spend),
      ...plain,
      balanceMg,
      seen: JSON.stringify({
        ...known,
        [operation.installId]: Math.max(known[operation.installId] ?? 0, operation.deviceSeq),
      }),
      changeSeq: seq,
    })
    .where('shopId', '=', shopId)
    .where('id', '=', bucket.id)
    .execute();
  return firstN + rows.length;
}
