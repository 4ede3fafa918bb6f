import type { Composition } from './composition.ts';
import { FoldInError, requireProblem } from './fold-in-check.ts';
import { prepareSearch } from './fold-in-candidates.ts';
import { branchAndBound } from './fold-in-search.ts';
import type { Milligrams, PartsPerBillion } from './mass.ts';

export { verifyPlan } from './verify-plan.ts';
export { FoldInError };

/** Which leftovers go into a batch; all masses in mg, shares in ppb (core mathematics A). */
export interface FoldInProblem {
  target: Composition;
  /** Multiples of `readability`; equal for a fixed batch. */
  batch: { minimum: Milligrams; maximum: Milligrams };
  /** Already filtered by the rules; `usable` = content − wall loss; `mustUse`: build on this tub. */
  buckets: readonly { id: string; usable: Milligrams; composition: Composition; mustUse?: boolean }[];
  /** τ of each component, foreign ones included; absent = 0; an empty map asks for the same recipe. */
  tolerance: ReadonlyMap<string, PartsPerBillion>;
  readability: Milligrams;
  minimumFromBucket: Milligrams;
  minimumFresh: Milligrams;
  sliver: Milligrams;
  maximumBuckets: number;
  /** κ: what a bucket must save to be opened. */
  worthOpening: Milligrams;
}

export interface FoldInPlan {
  /** 'none': no bucket is worth using; still a full fresh plan. */
  status: 'best' | 'gap' | 'none';
  batch: Milligrams;
  reused: Milligrams;
  /** Fixed batch: reused − κ·buckets; a range: −fresh mass − κ·buckets. */
  objective: Milligrams;
  /** No plan, before rounding, has a greater objective. */
  objectiveBound: Milligrams;
  fromBuckets: readonly { bucketId: string; mass: Milligrams; empties: boolean }[];
  fresh: ReadonlyMap<string, Milligrams>;
  /** What the mathematics ruled out, one line each. */
  excluded: readonly { bucketId: string; reason: string }[];
}

/** Yields the best plan so far with its bound now and then; the caller keeps the time. @throws FoldInError */
export function* searchFoldIn(problem: FoldInProblem): Generator<{ plan: FoldInPlan; bound: Milligrams }, FoldInPlan> {
  requireProblem(problem);
  return yield* branchAndBound(prepareSearch(problem));
}

/** Runs the search to its end. @throws FoldInError */
export function foldInBuckets(problem: FoldInProblem): FoldInPlan {
  const search = searchFoldIn(problem);
  for (;;) {
    const step = search.next();
    if (step.done) return step.value;
  }
}
