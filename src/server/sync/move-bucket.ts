import { needsRecount } from '#domain/needs-recount.ts';
import { type ApplyContext, RejectedError } from './apply-context.ts';
import type { BucketRow } from './push-facts.ts';

/** @throws RejectedError when the shop has no such tub */
export function requireBucket({ draft }: ApplyContext, id: string): BucketRow {
  const row = draft.findTub(id);
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
export function moveBucket(
  context: ApplyContext,
  bucket: BucketRow,
  movements: readonly Movement[],
  change: Partial<BucketRow>,
  firstN = 1,
): number {
  const { shopId, operation, seq, draft } = context;
  const balanceMg = movements.reduce((sum, movement) => sum + movement.deltaMg, bucket.balanceMg);
  draft.writes.movements.push(
    ...movements.map((movement, index) => ({
      shopId,
      opId: operation.opId,
      n: firstN + index,
      bucketId: bucket.id,
      kind: movement.kind,
      deltaMg: movement.deltaMg,
      jobId: movement.jobId ?? null,
    })),
  );
  const known = bucket.seen as Record<string, number>;
  const spend = { installId: operation.installId, seen: operation.seen[bucket.id] ?? {} };
  const seen = { ...known, [operation.installId]: Math.max(known[operation.installId] ?? 0, operation.deviceSeq) };
  draft.tubs.set(bucket.id, {
    ...bucket,
    needsRecount: bucket.needsRecount || needsRecount(balanceMg, known, spend),
    ...change,
    balanceMg,
    seen,
    changeSeq: seq,
  });
  return firstN + movements.length;
}
