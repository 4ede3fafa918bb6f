import { type TubEffect, type TubFields, changeTub } from '#domain/tub-trace.ts';
import { type ApplyContext, NotYetError, RejectedError } from './apply-context.ts';
import type { BucketRow } from './push-facts.ts';

/** A tub whose row is read as the domain reads it. */
export type TubRow = BucketRow & TubFields;

/**
 * @throws RejectedError when the shop has no such tub, or refused the entry that filled it
 * @throws NotYetError when the station has seen it: what filled it is still to come
 */
export function requireBucket({ draft, operation }: ApplyContext, id: string): TubRow {
  const row = draft.findTub(id);
  if (row !== undefined) return row as TubRow;
  if (draft.isRefused(id)) {
    const detail = 'The entry that filled this tub was not accepted. Settle that one, then send this one again.';
    throw new RejectedError('tub-refused', detail);
  }
  if (Object.keys(operation.seen[id] ?? {}).length > 0) throw new NotYetError();
  throw new RejectedError('no-such-tub', 'There is no such tub in this shop.');
}

type MovementKind = 'filled' | 'folded-in' | 'wall-loss' | 'used' | 'recounted' | 'discarded';

interface Movement {
  kind: MovementKind;
  deltaMg: number;
  jobId?: string | null;
}

/**
 * Books the movements of which an effect on a bucket consists and changes its row: the balance stays the sum of its
 * movements. @returns the number of the next movement of this operation
 */
export function moveBucket(
  context: ApplyContext,
  bucket: TubRow,
  effect: TubEffect,
  movements: readonly Movement[],
  firstN = 1,
): number {
  const { shopId, operation, seq, draft } = context;
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
  const entry = { ...operation, seen: operation.seen[bucket.id] ?? {} };
  draft.tubs.set(bucket.id, { ...changeTub(bucket, entry, effect), changeSeq: seq });
  return firstN + movements.length;
}
