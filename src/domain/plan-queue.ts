import type { FoldInPlan, FoldInProblem } from './fold-in.ts';
import type { Milligrams } from './mass.ts';
import { requireQueue } from './queue-check.ts';
import { planWeek } from './queue-search.ts';

export { verifyQueue } from './queue-verify.ts';

/** The week's batches, in the order in which they are made, and one shelf for all (core mathematics D). */
export interface QueueProblem {
  /** `allowed`: ids of the buckets that this batch may use; absent = all. */
  batches: readonly (Omit<FoldInProblem, 'buckets'> & { id: string; allowed?: ReadonlySet<string> })[];
  /** `mustUse`: some batch, or several together, must empty it. */
  buckets: FoldInProblem['buckets'];
}

export interface QueuePlans {
  /**
   * One for each batch, in the order of the queue: each is a plan for what the batches before it leave of the buckets.
   * Its `objectiveBound` is that of the batch alone with the whole shelf for it, so 'gap' may be what the others took.
   */
  plans: ReadonlyMap<string, FoldInPlan>;
  /** mg from buckets, of all batches. */
  reused: Milligrams;
  /**
   * `reused` and what is not proven to be impossible: no plans have a greater sum of objectives than these by more than
   * bound − reused. At κ = 0 and fixed batches simply the most that can be reused. Floating point, rounded up by a margin.
   */
  bound: Milligrams;
}

/**
 * Yields the best plans so far with their bound: first when every batch has a plan (a second's work for 500 buckets and
 * 40 batches), then after every few milliseconds' work; the caller keeps the time. Ends when the bound is reached, or when
 * the prices stand and 60 turns and 12 for each batch, each taking some plans back, have made nothing better. The same
 * problem gives the same plans. @throws FoldInError for bad input, and when a bucket that must be used up cannot be
 */
export function* searchQueue(problem: QueueProblem): Generator<QueuePlans, QueuePlans> {
  requireQueue(problem);
  return yield* planWeek(problem);
}
