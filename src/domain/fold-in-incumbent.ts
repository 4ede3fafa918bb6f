import type { FoldInPlan } from './fold-in.ts';
import type { Search } from './fold-in-candidates.ts';
import { FoldInError } from './fold-in-check.ts';
import { planNear } from './fold-in-dive.ts';
import type { Rounded } from './fold-in-round.ts';
import { rootOf } from './fold-in-subset.ts';
import type { Milligrams } from './mass.ts';

/** The best plan so far; at first the one without any bucket but those that must be used. */
export class Incumbent {
  private readonly search: Search;
  private best: Rounded | undefined;
  private opened = 0;
  /** mg */
  objective: number;

  /** @throws FoldInError when a bucket must be used that cannot be */
  constructor(search: Search) {
    this.search = search;
    if (search.candidates.some((candidate) => candidate.mustUse)) this.best = withoutChoice(search);
    this.objective = this.best?.objective ?? (search.greatest > search.least ? -search.least : 0);
  }

  offer(found: Rounded | undefined): void {
    if (found === undefined || found.objective <= this.objective) return;
    this.best = found;
    this.objective = found.objective;
    this.opened = found.fromBuckets.length;
  }

  /** mg: an objective beyond which nothing is worth seeking. */
  get enough(): number {
    return this.objective + this.allowance;
  }

  /** A bound this near is the same plan: a step for each bucket is lost in rounding, and a millionth is no ink. */
  private get allowance(): number {
    const rounding = this.search.problem.readability * Math.max(1, this.opened);
    return Math.max(rounding, Math.abs(this.objective) * 1e-6);
  }

  /** @param bound mg; no plan has a greater objective @throws FoldInError when nothing can be weighed */
  describe(bound: number): FoldInPlan {
    this.best ??= withoutChoice(this.search);
    const objectiveBound = Math.max(this.objective, bound) as Milligrams;
    const isProven = objectiveBound <= this.enough + 1;
    const used = new Set(this.best.fromBuckets.map((from) => from.bucketId));
    const excluded = this.search.excluded.filter(({ bucketId }) => !used.has(bucketId));
    return { status: !isProven ? 'gap' : used.size === 0 ? 'none' : 'best', ...this.best, objectiveBound, excluded };
  }
}

/** Without any bucket but those that must be used. @throws FoldInError when not even that can be weighed */
function withoutChoice(search: Search): Rounded {
  const candidates = search.candidates.filter((candidate) => candidate.mustUse);
  const plan = planNear(rootOf({ ...search, candidates }), -Infinity);
  if (plan !== undefined) return plan;
  if (candidates.length > 0) throw new FoldInError('That tub cannot be emptied into this batch.');
  throw new FoldInError('This batch cannot be weighed on this scale.');
}
