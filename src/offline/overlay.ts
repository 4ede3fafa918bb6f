import type { Operation } from '#contract/operation.ts';
import type { Row } from '#contract/rows.ts';
import { adoptedTub } from './overlay-adopted.ts';
import { foldBatchMixed } from './overlay-batch.ts';
import { changeTub } from './overlay-bucket.ts';
import { foldReturned } from './overlay-return.ts';

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
      return changeBucket(shown, operation, () => ({
        state: 'at-press',
        jobId: operation.body.jobId,
        locationId: null,
      }));
    case 'bucket-returned':
      return changeBucket(shown, operation, (bucket) => foldReturned(bucket, operation.body));
    case 'bucket-relocated':
      return changeBucket(shown, operation, () => ({ locationId: operation.body.locationId }));
    case 'bucket-recounted':
      return changeBucket(shown, operation, (bucket) => ({
        balanceMg: bucket.balanceMg + operation.body.deltaMg,
        tareMg: operation.body.tareMg,
        needsRecount: false,
      }));
    case 'bucket-adopted':
      return { ...shown, buckets: new Map(shown.buckets).set(operation.body.bucketId, adoptedTub(operation)) };
    case 'bucket-discarded':
      return changeBucket(shown, operation, () => ({ balanceMg: 0, state: 'discarded', needsRecount: false }));
  }
}

function foldReleased(shown: Shown, operation: Operation & { type: 'batch-released' }): Shown {
  const batch = shown.batches.get(operation.body.batchId);
  if (batch === undefined) return shown;
  const batches = new Map(shown.batches).set(batch.id, {
    ...batch,
    state: 'released',
    light: operation.body.release.light,
    releasedBy: operation.actorId,
  });
  const buckets = new Map(shown.buckets);
  for (const bucket of shown.buckets.values()) {
    if (bucket.batchId === batch.id) buckets.set(bucket.id, { ...bucket, released: true });
  }
  return { buckets, batches };
}

type OnOneBucket = Extract<Operation, { body: { bucketId: string } }>;

/** A bucket that is not on this device stays unknown; the server knows it. */
function changeBucket(
  shown: Shown,
  operation: OnOneBucket,
  change: (bucket: Row<'buckets'>) => Partial<Row<'buckets'>>,
): Shown {
  const bucket = shown.buckets.get(operation.body.bucketId);
  if (bucket === undefined) return shown;
  const changed = changeTub(bucket, operation, change(bucket));
  return { ...shown, buckets: new Map(shown.buckets).set(bucket.id, changed) };
}
