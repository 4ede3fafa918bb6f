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

/** What is shown: the cache with the effect of every operation that it does not hold yet, in the order of recording. */
export function foldPending(cached: Shown, operations: readonly Operation[], facts: OverlayFacts): Shown {
  return operations.reduce((shown, operation) => foldOne(shown, operation, facts), cached);
}

function foldOne(shown: Shown, operation: Operation, facts: OverlayFacts): Shown {
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
      return { ...shown, buckets: new Map(shown.buckets).set(operation.body.bucketId, adoptedTub(operation)) };
    case 'shift-reported':
    case 'entry-dropped':
    case 'formula-proposed':
      return shown;
  }
}

function foldReleased(shown: Shown, operation: Operation & { type: 'batch-released' }): Shown {
  const batch = shown.batches.get(operation.body.batchId);
  if (batch === undefined) return shown;
  const { light } = operation.body.release;
  // Of several releases the same one stays on every device and on the server.
  const stays = batch.state === 'released' && `${batch.releasedBy} ${batch.light}` >= `${operation.actorId} ${light}`;
  const released = { ...batch, state: 'released', light, releasedBy: operation.actorId } as const;
  const batches = new Map(shown.batches).set(batch.id, stays ? batch : released);
  const buckets = new Map(shown.buckets);
  for (const bucket of shown.buckets.values()) {
    if (bucket.batchId === batch.id)
      buckets.set(bucket.id, { ...bucket, released: true, seen: withEntry(bucket.seen, operation) });
  }
  return { buckets, batches };
}

type OnOneBucket = Extract<Operation, { body: { bucketId: string } }>;

/** A bucket that is not on this device stays unknown; the server knows it. */
function changeBucket(shown: Shown, operation: OnOneBucket, effect: TubEffect): Shown {
  const bucket = shown.buckets.get(operation.body.bucketId);
  if (bucket === undefined) return shown;
  return { ...shown, buckets: new Map(shown.buckets).set(bucket.id, foldTub(bucket, operation, effect)) };
}
