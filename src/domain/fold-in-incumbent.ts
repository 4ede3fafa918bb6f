import type { FoldInPlan } from './fold-in.ts';
import type { Search } from './fold-in-candidates.ts';
import { FoldInError } from './fold-in-check.ts';
import { mostOf } from './fold-in-decisions.ts';
import { planNear } from './fold-in-dive.ts';
import type { Rounded } from './fold-in-round.ts';
import { rootOf } from './fold-in-subset.ts';
import type { Milligrams } from './mass.ts';

/** Buckets that are tried one by one. */
const MOST_SINGLES = 12;

/** The best plan so far; at first the one without any bucket but those that must be used. */
export class Incumbent {
  private readonly search: Search;
  private best: Rounded | undefined;
  private opened = 0;
  /** mg */
  objective: number;

  constructor(search: Search) {
    this.search = search;
    const mustUse = search.candidates.some((candidate) => candidate.mustUse);
    if (mustUse) this.best = withoutChoice(search);
    const nothing = search.greatest > search.least ? -search.least : 0;
    this.objective = this.best?.objective ?? (mustUse ? -Infinity : nothing);
  }

  /** Without a bucket that must be used there is always one. */
  get isThere(): boolean {
    return this.objective > -Infinity;
  }

  /** The bucket that gives most by itself: where a plan of several is hard to find there is one of one. */
  offerSingles(): void {
    const { search } = this;
    if (this.opened > 0 || search.candidates.some((candidate) => candidate.mustUse)) return;
    const byMost = search.candidates.toSorted((a, b) => mostOf(b) - mostOf(a));
    for (const candidate of byMost.slice(0, MOST_SINGLES)) {
      if (mostOf(candidate) - search.problem.worthOpening <= this.enough) return;
      this.offer(planNear(rootOf({ ...search, candidates: [candidate] }), this.enough));
    }
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
    if (!this.isThere) return 0;
    const rounding = this.search.problem.readability * Math.max(1, this.opened);
    return Math.max(rounding, Math.abs(this.objective) * 1e-6);
  }

  /** @param bound mg; no plan has a greater objective @throws FoldInError when there is no plan */
  describe(bound: number): FoldInPlan {
    this.best ??= withoutChoice(this.search);
    if (this.best === undefined) throw new FoldInError(this.whyNot);
    const objectiveBound = Math.max(this.objective, bound) as Milligrams;
    const isProven = objectiveBound <= this.enough + 1;
    const used = new Set(this.best.fromBuckets.map((from) => from.bucketId));
    const excluded = this.search.excluded.filter(({ bucketId }) => !used.has(bucketId));
    return { status: !isProven ? 'gap' : used.size === 0 ? 'none' : 'best', ...this.best, objectiveBound, excluded };
  }

  private get whyNot(): string {
    return this.isThere ? 'This batch cannot be weighed on this scale.' : 'That tub cannot be emptied into this batch.';
  }
}

/** Without any bucket but those that must be used. */
function withoutChoice(search: Search): Rounded | undefined {
  const candidates = search.candidates.filter((candidate) => candidate.mustUse);
  return planNear(rootOf({ ...search, candidates }), -Infinity);
}
