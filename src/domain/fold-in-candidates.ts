import type { FoldInPlan, FoldInProblem } from './fold-in.ts';
import { WHOLE } from './mass.ts';

/** A bucket that could go in. Masses in mg, whole but for rounding up: bounds, not amounts. */
export interface Candidate {
  /** Where it stands in the problem's list. */
  index: number;
  usable: number;
  /** The most that may be taken without emptying it, leaving no sliver; below `Search.minimum` when nothing may. */
  most: number;
  canEmpty: boolean;
  mustUse: boolean;
  /** Share of each component of the search, 0 to 1. */
  shares: Float64Array;
}

/** The problem in the form of the search: components as rows, candidates as columns. */
export interface Search {
  problem: FoldInProblem;
  components: readonly string[];
  /** ppb of each component: target, the edges of its tolerance. */
  target: Float64Array;
  lower: Float64Array;
  upper: Float64Array;
  candidates: readonly Candidate[];
  /** Why a bucket gives nothing, or less than it costs to open; the latter may still serve a plan. */
  excluded: FoldInPlan['excluded'];
  /** mg, on a step: the least that is taken out of a bucket. */
  minimum: number;
  least: number;
  greatest: number;
}

/** Drops what cannot give anything, each with its reason. A bucket that must be used is kept whatever it costs. */
export function prepareSearch(problem: FoldInProblem): Search {
  const minimum = Math.max(1, Math.ceil(problem.minimumFromBucket / problem.readability)) * problem.readability;
  const kept: Omit<Candidate, 'shares'>[] = [];
  const excluded: { bucketId: string; reason: string }[] = [];
  problem.buckets.forEach((bucket, index) => {
    const cap = capOf(problem, bucket.composition);
    const most = Math.min(cap, bucket.usable - problem.sliver);
    const canEmpty = bucket.usable > 0 && bucket.usable <= cap;
    const mustUse = bucket.mustUse === true;
    const limits = { usable: bucket.usable, cap, most, canEmpty, minimum };
    const reason = whyNot(limits) ?? whyNotWorth(limits, problem.worthOpening);
    if (mustUse || whyNot(limits) === undefined) kept.push({ index, usable: bucket.usable, most, canEmpty, mustUse });
    if (reason !== undefined && !mustUse) excluded.push({ bucketId: bucket.id, reason });
  });
  return { ...rowsOf(problem, kept), problem, excluded, minimum };
}

function rowsOf(problem: FoldInProblem, kept: readonly Omit<Candidate, 'shares'>[]) {
  const places = new Map<string, number>();
  const place = (id: string) => void (places.has(id) || places.set(id, places.size));
  for (const id of problem.target.keys()) place(id);
  for (const { index } of kept) for (const id of compositionAt(problem, index).keys()) place(id);
  const components = [...places.keys()];
  const of = (value: (id: string) => number) => Float64Array.from(components, value);
  const share = (id: string) => problem.target.get(id) ?? 0;
  const tau = (id: string) => problem.tolerance.get(id) ?? 0;
  const { minimum: least, maximum: greatest } = problem.batch;
  return {
    components,
    target: of(share),
    lower: of((id) => Math.max(0, share(id) - tau(id))),
    upper: of((id) => share(id) + tau(id)),
    candidates: kept.map((candidate): Candidate => {
      const shares = new Float64Array(components.length);
      for (const [id, ppb] of compositionAt(problem, candidate.index)) shares[places.get(id) as number] = ppb / WHOLE;
      return { ...candidate, shares };
    }),
    least,
    greatest,
  };
}

function compositionAt(problem: FoldInProblem, index: number): ReadonlyMap<string, number> {
  return problem.buckets[index]?.composition ?? new Map();
}

/** The most of a bucket that the batch takes: min over its components of M(t + τ)/r, rounded up to whole mg. */
function capOf(problem: FoldInProblem, composition: ReadonlyMap<string, number>): number {
  let cap: number = problem.batch.maximum;
  for (const [id, share] of composition) {
    const most = (problem.target.get(id) ?? 0) + (problem.tolerance.get(id) ?? 0);
    cap = Math.min(cap, Math.ceil((problem.batch.maximum * most) / share));
  }
  return cap;
}

interface Limits {
  usable: number;
  cap: number;
  most: number;
  canEmpty: boolean;
  minimum: number;
}

const grams = (mass: number) => (Math.floor(mass / 100) / 10).toFixed(1);

function whyNot({ usable, cap, most, canEmpty, minimum }: Limits): string | undefined {
  if (cap === 0) return 'Holds a component that this formula does not take.';
  if (canEmpty || most >= minimum) return undefined;
  if (usable < minimum) return 'Too little in it to take out.';
  if (cap < minimum) return `Only ${grams(cap)} g of it would fit.`;
  return 'What stays in it would be too little to keep.';
}

function whyNotWorth({ usable, most, canEmpty }: Limits, worth: number): string | undefined {
  const gives = canEmpty ? usable : most;
  return gives < worth ? `Would save ${grams(gives)} g: not worth opening.` : undefined;
}
