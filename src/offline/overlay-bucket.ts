import type { Operation } from '#contract/operation.ts';
import type { Row } from '#contract/rows.ts';
import { needsRecount } from '#domain/needs-recount.ts';

/** One operation's change of a tub: an over-spend is flagged and never clipped, as the server does. */
export function changeTub(
  bucket: Row<'buckets'>,
  operation: Operation,
  change: Partial<Row<'buckets'>>,
): Row<'buckets'> {
  const { installId, deviceSeq } = operation;
  const spend = { installId, seen: operation.seen[bucket.id] ?? {} };
  const balanceMg = change.balanceMg ?? bucket.balanceMg;
  return {
    ...bucket,
    needsRecount: bucket.needsRecount || needsRecount(balanceMg, bucket.seen, spend),
    ...change,
    seen: { ...bucket.seen, [installId]: Math.max(bucket.seen[installId] ?? 0, deviceSeq) },
  };
}

/** The device's time by the clock of its last contact with the server. */
export function correctedTime(operation: Operation): string {
  return new Date(new Date(operation.deviceTime).getTime() + operation.clock.offsetMs).toISOString();
}
