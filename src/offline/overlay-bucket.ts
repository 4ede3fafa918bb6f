import type { Operation } from '#contract/operation.ts';
import type { Row } from '#contract/rows.ts';
import { type TubEffect, changeTub } from '#domain/tub-trace.ts';

/** One operation's effect on a tub, as the server works it out. */
export function foldTub(bucket: Row<'buckets'>, operation: Operation, effect: TubEffect): Row<'buckets'> {
  return changeTub(bucket, { ...operation, seen: operation.seen[bucket.id] ?? {} }, effect);
}

/** The device's time by the clock of its last contact with the server. */
export function correctedTime(operation: Operation): string {
  return new Date(new Date(operation.deviceTime).getTime() + operation.clock.offsetMs).toISOString();
}
