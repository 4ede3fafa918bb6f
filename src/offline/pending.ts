import type { QueuedOperation } from './outbox.ts';

/** True while rows as of change `seq` do not contain this entry's effect yet: it waits, or was taken after them. */
export function isPendingAt(
  { status, changeSeq }: Pick<QueuedOperation, 'status' | 'changeSeq'>,
  seq: number,
): boolean {
  return status === 'waiting' || (status === 'sent' && (changeSeq ?? 0) > seq);
}
