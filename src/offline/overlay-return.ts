import type { OperationBody } from '#contract/operation-bodies.ts';
import type { Row } from '#contract/rows.ts';

type Returned = Extract<OperationBody, { type: 'bucket-returned' }>['body'];

/** Back from the press: content by weight, one generation more, quarantine when dirty, empty when nothing is left. */
export function foldReturned(bucket: Row<'buckets'>, body: Returned): Partial<Row<'buckets'>> {
  const balanceMg = bucket.balanceMg + body.deltaMg;
  return {
    balanceMg,
    tareMg: body.tareMg,
    locationId: body.locationId,
    jobId: body.jobId ?? bucket.jobId,
    grade: bucket.grade === 'untouched' ? 'returned' : bucket.grade,
    generation: bucket.generation + 1,
    state: body.condition === 'dirty' ? 'quarantine' : balanceMg === 0 ? 'empty' : 'shelf',
  };
}
