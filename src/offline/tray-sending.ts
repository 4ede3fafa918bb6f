import { type Problem, SETTLED } from '#contract/problem.ts';
import type { Outbox, QueuedOperation } from './outbox.ts';

/** Marks the drops of a batch as on their way. @returns the batch without those that were taken back meanwhile */
export async function markTried(
  outbox: Outbox,
  batch: readonly QueuedOperation[],
  now: () => Date,
): Promise<QueuedOperation[]> {
  const drops = batch.flatMap(({ opId, operation }) => (operation.type === 'entry-dropped' ? opId : []));
  if (drops.length === 0) return [...batch];
  const gone = await outbox.transaction('rw', outbox.ops, async () => {
    const missing = new Set<string>();
    for (const opId of drops) {
      const drop = await outbox.ops.get(opId);
      if (drop === undefined) missing.add(opId);
      else if (drop.triedAt === undefined) await outbox.ops.update(opId, { triedAt: now().toISOString() });
    }
    return missing;
  });
  return batch.filter(({ opId }) => !gone.has(opId));
}

/** A refused entry waits for a person, but for one that somebody settled already. */
export function refusedAs({ code }: Problem): 'rejected' | 'dropped' {
  return code === SETTLED ? 'dropped' : 'rejected';
}
