import type { Operation } from '#contract/operation.ts';
import type { Row } from '#contract/rows.ts';

export interface Names {
  formulas: ReadonlyMap<string, Row<'formulas'>>;
  buckets: ReadonlyMap<string, Row<'buckets'>>;
}

const VERBS = {
  'bucket-issued': 'Issued',
  'bucket-returned': 'Returned',
  'bucket-relocated': 'Moved',
  'bucket-recounted': 'Re-weighed',
  'bucket-discarded': 'Discarded',
  'bucket-adopted': 'Took in',
} as const;

/** An operation in the words of the room, with its mass where it has one. */
export function describeOperation(operation: Operation, names: Names): { title: string; massMg: number | undefined } {
  if (operation.type === 'batch-mixed') {
    const name = names.formulas.get(operation.body.formulaId)?.name ?? 'a batch';
    return { title: `Mixed ${name}`, massMg: operation.body.filled.reduce((sum, tub) => sum + tub.massMg, 0) };
  }
  if (operation.type === 'formula-proposed') {
    const name = names.formulas.get(operation.body.formulaId)?.name ?? 'a formula';
    return { title: `Proposed a change of ${name}`, massMg: undefined };
  }
  if (operation.type === 'batch-released') return { title: 'Released a batch', massMg: undefined };
  if (operation.type === 'shift-reported') return { title: 'Shift summary to the manager', massMg: undefined };
  if (operation.type === 'entry-dropped') return { title: 'Dropped a log', massMg: undefined };
  const bucket = names.buckets.get(operation.body.bucketId);
  const title = `${VERBS[operation.type]} ${bucket?.name ?? 'a tub'}`;
  const weighed = operation.type === 'bucket-returned' || operation.type === 'bucket-recounted';
  return { title, massMg: weighed ? operation.body.grossMg - operation.body.tareMg : undefined };
}
