import type { FoldInPlan, FoldInProblem } from '#domain/fold-in.ts';
import type { PartsPerBillion } from '#domain/mass.ts';
import { type LeftOut, type ShelfFacts, chooseCandidates, foldInProblem } from './fold-in-problem.ts';

export interface Suggestion {
  kind: 'same-recipe' | 'within-tolerance';
  plan: FoldInPlan;
  problem: FoldInProblem;
}

export interface Suggestions {
  /** The easiest that is worth it first; each later one differs in its buckets or re-uses more. */
  suggestions: readonly Suggestion[];
  /** The plan without any bucket. */
  fresh: FoldInPlan;
  leftOut: readonly LeftOut[];
}

type Solve = (problem: FoldInProblem) => Promise<FoldInPlan>;

/** Solves same recipe and within tolerance, for one bucket and for as many as the shop allows. */
export async function suggestPlans(
  facts: ShelfFacts,
  tolerance: ReadonlyMap<string, PartsPerBillion>,
  solve: Solve,
): Promise<Suggestions> {
  const { candidates, leftOut } = chooseCandidates(facts);
  const most = facts.settings.maximumBuckets;
  const counts = most > 1 ? [1, most] : [1];
  const suggestions: Suggestion[] = [];
  for (const maximumBuckets of counts) {
    for (const kind of ['same-recipe', 'within-tolerance'] as const) {
      const problem = foldInProblem(facts, candidates, kind === 'same-recipe' ? new Map() : tolerance, maximumBuckets);
      const plan = await solve(problem);
      if (plan.fromBuckets.length > 0 && !suggestions.some((known) => isNoBetter(plan, known.plan))) {
        suggestions.push({ kind, plan, problem });
      }
    }
  }
  const fresh = await solve(foldInProblem(facts, [], new Map(), most));
  return { suggestions, fresh, leftOut: [...leftOut, ...ruledOut(facts, suggestions)] };
}

/** Same buckets and not more re-used: nothing that a technician would choose. */
function isNoBetter(plan: FoldInPlan, known: FoldInPlan): boolean {
  const buckets = (of: FoldInPlan) =>
    of.fromBuckets
      .map((from) => from.bucketId)
      .sort()
      .join(' ');
  return buckets(plan) === buckets(known) && plan.reused <= known.reused;
}

/** What the mathematics left out of the widest search that was made. */
function ruledOut(facts: ShelfFacts, suggestions: readonly Suggestion[]): LeftOut[] {
  const widest = suggestions.at(-1)?.plan.excluded ?? [];
  const byId = new Map(facts.buckets.map((bucket) => [bucket.id, bucket]));
  return widest.flatMap(({ bucketId, reason }) => {
    const bucket = byId.get(bucketId);
    return bucket === undefined ? [] : [{ bucket, reason }];
  });
}
