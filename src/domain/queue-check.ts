import { FoldInError, requireProblem } from './fold-in-check.ts';
import type { QueueProblem } from './plan-queue.ts';

/** @throws FoldInError for what no shop can have: see `requireProblem`, and names that stand twice or are not known */
export function requireQueue({ batches, buckets }: QueueProblem): void {
  const known = new Set(buckets.map((bucket) => bucket.id));
  if (known.size !== buckets.length) throw new FoldInError('A bucket stands twice on the shelf: list each once.');
  const named = new Set<string>();
  batches.forEach(({ id, allowed, ...batch }, n) => {
    if (named.has(id)) throw new FoldInError(`Batch ${id} stands twice in the queue: list it once.`);
    named.add(id);
    // The shelf is the same for all: it is looked at with the first.
    told(`Batch ${id}`, () => requireProblem({ ...batch, buckets: n === 0 ? buckets : [] }));
    for (const bucketId of allowed ?? [])
      if (!known.has(bucketId))
        throw new FoldInError(`Batch ${id} may use bucket ${bucketId}, which is not on the shelf.`);
  });
  const must = buckets.find((bucket) => bucket.mustUse);
  if (must !== undefined && batches.length === 0)
    throw new FoldInError(`Bucket ${must.id} must be used up, but there is no batch in the queue.`);
}

/** Says which batch it is about. */
export function told<T>(name: string, act: () => T): T {
  try {
    return act();
  } catch (error) {
    if (error instanceof FoldInError) throw new FoldInError(`${name}: ${error.message}`, { cause: error });
    throw error;
  }
}
