import { type Search, prepareSearch } from './fold-in-candidates.ts';
import type { FoldInProblem } from './fold-in.ts';
import { type Milligrams, WHOLE } from './mass.ts';
import { type Relaxation, relaxationOf } from './fold-in-program.ts';
import type { QueueProblem } from './plan-queue.ts';

/** One batch of the queue as the search sees it, and what of the shelf could go into it. */
export interface QueueBatch {
  id: string;
  /** Where it stands in the queue. */
  place: number;
  ask: Omit<FoldInProblem, 'buckets'>;
  search: Search;
  relaxation: Relaxation;
  /** Of each candidate: where it stands on the shelf, and the most mg that the batch could take of it. */
  buckets: Int32Array;
  caps: Float64Array;
  /** mg, on a step: the least that is taken of a bucket without emptying it; and the least that may be left to empty. */
  minimum: number;
  leastRest: number;
  /** Of each component, mg: m_j = min(m, M·t_j) at the least batch; fresh ink of it is none or at least this. */
  leastFresh: Float64Array;
}

/** How an opened candidate may give, mg: from `least` to `partly`, or `most` whole. Never when `most` is 0. */
export interface Limits {
  least: Float64Array;
  partly: Float64Array;
  most: Float64Array;
}

export function prepareBatch(queue: QueueProblem, place: number): QueueBatch {
  const { id, allowed, ...ask } = queue.batches[place] as QueueProblem['batches'][number];
  const standing = queue.buckets.flatMap((bucket, n) => (allowed === undefined || allowed.has(bucket.id) ? [n] : []));
  // Another batch may take what this one leaves, and any of them may be the one that empties what must be used.
  const buckets = standing.map((n) => ({ ...(queue.buckets[n] as QueueProblem['buckets'][number]), mustUse: false }));
  const leastRest = Math.min(ask.minimumFromBucket, ...queue.batches.map(({ sliver }) => sliver)) as Milligrams;
  const search = prepareSearch({ ...ask, buckets, minimumFromBucket: leastRest, sliver: 0 as Milligrams });
  return {
    id,
    place,
    ask,
    search,
    relaxation: relaxationOf(search),
    buckets: Int32Array.from(search.candidates, ({ index }) => standing[index] as number),
    caps: Float64Array.from(search.candidates, ({ canEmpty, usable, most }) => (canEmpty ? usable : most)),
    minimum: Math.max(1, Math.ceil(ask.minimumFromBucket / ask.readability)) * ask.readability,
    leastRest,
    leastFresh: search.target.map((ppb) => Math.min(ask.minimumFresh, Math.floor((ask.batch.minimum * ppb) / WHOLE))),
  };
}

/**
 * What any plan of the queue could take, whatever the other batches leave: of a bucket that no other batch could use,
 * what stays is no sliver.
 * @param askers of each bucket on the shelf: how many batches could use it @param sliver mg: the least of any batch
 */
export function widestLimits(batch: QueueBatch, askers: Uint32Array, sliver: number): Limits {
  const { caps, leastRest, minimum, buckets, search } = batch;
  const limits = { least: caps.map((cap) => Math.min(cap, leastRest)), partly: caps.slice(), most: caps.slice() };
  buckets.forEach((bucket, k) => {
    if (askers[bucket] !== 1) return;
    const { usable } = search.candidates[k] as Search['candidates'][number];
    const cap = caps[k] as number;
    const partly = Math.min(cap, usable - sliver);
    limits.least[k] = minimum;
    limits.partly[k] = partly;
    limits.most[k] = cap === usable ? usable : partly >= minimum ? partly : 0;
  });
  return limits;
}

/** Of each bucket on the shelf: how many batches could use it. */
export function countAskers(batches: readonly QueueBatch[], count: number): Uint32Array {
  const askers = new Uint32Array(count);
  for (const { buckets } of batches) for (const bucket of buckets) askers[bucket] = (askers[bucket] as number) + 1;
  return askers;
}
