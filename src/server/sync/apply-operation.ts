import type { ApplyContext } from './apply-context.ts';
import { adoptBucket } from './adopt-bucket.ts';
import { applyBatchMixed } from './apply-batch-mixed.ts';
import {
  applyBatchReleased,
  applyDiscarded,
  applyIssued,
  applyRecounted,
  applyRelocated,
  applyReturned,
} from './apply-bucket.ts';
import { applyFormulaProposed } from './apply-formula-proposed.ts';
import { applyShiftReported } from './apply-shift-reported.ts';

/** The effect of one operation on batches, buckets and movements. */
export function applyOperation(context: ApplyContext): void {
  const { operation } = context;
  switch (operation.type) {
    case 'batch-mixed':
      return applyBatchMixed(context, operation.body);
    case 'batch-released':
      return applyBatchReleased(context, operation.body);
    case 'bucket-issued':
      return applyIssued(context, operation.body);
    case 'bucket-returned':
      return applyReturned(context, operation.body);
    case 'bucket-relocated':
      return applyRelocated(context, operation.body);
    case 'bucket-recounted':
      return applyRecounted(context, operation.body);
    case 'bucket-discarded':
      return applyDiscarded(context, operation.body);
    case 'bucket-adopted':
      return adoptBucket(context, operation.body);
    case 'formula-proposed':
      return applyFormulaProposed(context, operation.body);
    case 'shift-reported':
      return applyShiftReported(context, operation.body);
    case 'entry-dropped':
      // It changes no ink: `RefusedEntries` settles what it names.
      return;
  }
}
