import type { OperationBody } from '#contract/operation-bodies.ts';

/** The buckets whose content or place an operation changes; a new tub is not among them. */
export function touchedBuckets(operation: OperationBody): string[] {
  if (operation.type === 'batch-mixed') {
    return operation.body.additions.flatMap((addition) => (addition.kind === 'bucket' ? [addition.bucketId] : []));
  }
  if (operation.type === 'bucket-adopted') return [];
  return 'bucketId' in operation.body ? [operation.body.bucketId] : [];
}

/** Both: those that it touches and those that begin with it. */
export function tubsOf(operation: OperationBody): string[] {
  return [...new Set([...touchedBuckets(operation), ...bornBuckets(operation)])];
}

/** The buckets that begin with an operation. */
export function bornBuckets(operation: OperationBody): string[] {
  if (operation.type === 'batch-mixed') return operation.body.filled.map((tub) => tub.bucketId);
  return operation.type === 'bucket-adopted' ? [operation.body.bucketId] : [];
}
