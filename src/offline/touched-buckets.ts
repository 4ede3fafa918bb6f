import type { OperationBody } from '#contract/operation-bodies.ts';

/** The buckets whose content or place an operation changes; a new tub is not among them. */
export function touchedBuckets(operation: OperationBody): string[] {
  if (operation.type === 'batch-mixed') {
    return operation.body.additions.flatMap((addition) => (addition.kind === 'bucket' ? [addition.bucketId] : []));
  }
  return operation.type === 'batch-released' ? [] : [operation.body.bucketId];
}
