import type { Operation } from '#contract/operation.ts';
import type { Row } from '#contract/rows.ts';
import { discardedTub, issuedTub, recountedTub, relocatedTub, returnedTub } from '#domain/tub-effects.ts';
import { type TubEffect, withEntry } from '#domain/tub-trace.ts';
import { adoptedTub } from './overlay-adopted.ts';
import { foldBatchMixed } from './overlay-batch.ts';
import { foldTub } from './overlay-bucket.ts';

export interface Shown {
  buckets: ReadonlyMap<string, Row<'buckets'>>;
  batches: ReadonlyMap<string, Row<'batches'>>;
}

/** Rows that the effects read. */
export interface OverlayFacts {
  formulas: ReadonlyMap<string, Row<'formulas'>>;
  components: ReadonlyMap<string, Row<'components'>>;
  lots: ReadonlyMap<string, Row<'lots'>>;
}

/** Rows as they are after one operation; the others stay. */
export interface Changes {
  buckets?: readonly Row<'buckets'>[];
  batches?: readonly Row<'batches'>[];
}

/**
 * What is shown: the cache with the effect of every operation that it does not hold yet, in the order of recording.
 * Copied once: thousands may wait.
 */
export function foldPending(cached: Shown, operations: readonly Operation[], facts: OverlayFacts): Shown {
  const shown = { buckets: new Map(cached.buckets), batches: new Map(cached.batches) };
  for (const operation of operations) {
    const { buckets = [], batches = [] } = changesOf(operation, shown, facts);
    for (const bucket of buckets) shown.buckets.set(bucket.id, bucket);
    for (const batch of batches) shown.batches.set(batch.id, batch);
  }
  return shown;
}

function changesOf(operation: Operation, shown: Shown, facts: OverlayFacts): Changes {
  switch (operation.type) {
    case 'batch-mixed':
      return foldBatchMixed(shown, operation, facts);
    case 'batch-released':
      return foldReleased(shown, operation);
    case 'bucket-issued':
      return changeBucket(shown, operation, issuedTub(operation.body));
    case 'bucket-returned':
      return changeBucket(shown, operation, returnedTub(operation.body));
    case 'bucket-relocated':
      return changeBucket(shown, operation, relocatedTub(operation.body));
    case 'bucket-recounted':
      return changeBucket(shown, operation, recountedTub(operation.body));
    case 'bucket-discarded':
      return changeBucket(shown, operation, discardedTub(operation.body));
    case 'bucket-adopted':
      return { buckets: [adoptedTub(operation)] };
    case 'shift-reported':
    case 'entry-dropped':
    case 'formula-proposed':
      return {};
  }
}

function foldReleased(shown: Shown, operation: Operation & { type: 'batch-released' }): Changes {
  const batch = shown.batches.get(operation.body.batchId);
  if (batch === undefined) return {};
  const { light } = operation.body.release;
  // Of several releases the same one stays on every device and on the server.
  const stays = batch.state === 'released' && `${batch.releasedBy} ${batch.light}` >= `${operation.actorId} ${light}`;
  const released = { ...batch, state: 'released', light, releasedBy: operation.actorId } as const;
  const buckets = [...shown.buckets.values()]
    .filter((bucket) => bucket.batchId === batch.id)
    .map((bucket) => ({ ...bucket, released: true, seen: withEntry(bucket.seen, operation) }));
  return { buckets, batches: [stays ? batch : released] };
}

type OnOneBucket = Extract<Operation, { body: { bucketId: string } }>;

/** A bucket that is not on this device stays unknown; the server knows it. */
function changeBucket(shown: Shown, operation: OnOneBucket, effect: TubEffect): Changes {
  const bucket = shown.buckets.get(operation.body.bucketId);
  return bucket === undefined ? {} : { buckets: [foldTub(bucket, operation, effect)] };
}
