import type { FoldInPlan, FoldInProblem } from './fold-in.ts';
import { type Milligrams, WHOLE } from './mass.ts';

/** A bucket that could go in: what the target and its tolerance let in of it. Masses in mg, floating. */
export interface Candidate {
  index: number;
  usable: number;
  /** The most that may be taken without emptying; never leaves a sliver. */
  most: number;
  canEmpty: boolean;
  mustUse: boolean;
  /** Share of each component of the search, 0 to 1. */
  shares: Float64Array;
}

/** What the search has decided of a candidate; 'free' is still open. */
export type Decision = 'free' | 'closed' | 'partial' | 'emptied';

/** The problem in the form of the search: components as rows, candidates as columns. */
export interface Search {
  problem: FoldInProblem;
  components: readonly string[];
  target: Float64Array;
  tolerance: Float64Array;
  candidates: readonly Candidate[];
  excluded: FoldInPlan['excluded'];
  minimum: number;
  least: number;
  greatest: number;
  /** A bucket that must be used cannot be emptied into this batch. */
  impossible: boolean;
}

/** Drops what cannot give anything, each with its reason. */
export function prepareSearch(problem: FoldInProblem): Search {
  const components = [
    ...new Set([...problem.target.keys(), ...problem.buckets.flatMap((bucket) => [...bucket.composition.keys()])]),
  ];
  const target = Float64Array.from(components, (id) => (problem.target.get(id) ?? 0) / WHOLE);
  const tolerance = Float64Array.from(components, (id) => (problem.tolerance.get(id) ?? 0) / WHOLE);
  const minimum = Math.max(
    problem.readability,
    Math.ceil(problem.minimumFromBucket / problem.readability) * problem.readability,
  );
  const search = {
    problem,
    components,
    target,
    tolerance,
    minimum,
    least: problem.batch.minimum,
    greatest: problem.batch.maximum,
  };
  const candidates: Candidate[] = [];
  const excluded: { bucketId: string; reason: string }[] = [];
  let impossible = false;
  problem.buckets.forEach((bucket, index) => {
    const shares = Float64Array.from(components, (id) => (bucket.composition.get(id) ?? 0) / WHOLE);
    const cap = capOf(shares, target, tolerance, problem.batch.maximum);
    const most = Math.min(cap, bucket.usable - problem.sliver, problem.batch.maximum);
    const canEmpty = bucket.usable > 0 && bucket.usable <= cap * (1 + 1e-12);
    const mustUse = bucket.mustUse === true;
    if (mustUse && !canEmpty) impossible = true;
    const reason = whyNot(bucket.usable, cap, most, canEmpty, search.minimum, problem.worthOpening);
    if (reason === undefined || (mustUse && canEmpty))
      candidates.push({ index, usable: bucket.usable, most, canEmpty, mustUse, shares });
    else excluded.push({ bucketId: bucket.id, reason });
  });
  return { ...search, candidates, excluded, impossible };
}

/** The most of a bucket that the batch takes: min over its components of M(t + τ)/r. */
function capOf(shares: Float64Array, target: Float64Array, tolerance: Float64Array, batch: number): number {
  let cap = Infinity;
  shares.forEach((share, j) => {
    if (share > 0) cap = Math.min(cap, (batch * ((target[j] as number) + (tolerance[j] as number))) / share);
  });
  return cap;
}

function whyNot(
  usable: number,
  cap: number,
  most: number,
  canEmpty: boolean,
  minimum: number,
  worth: Milligrams,
): string | undefined {
  const grams = (mass: number) => (Math.floor(mass / 100) / 10).toFixed(1);
  if (usable < minimum && !canEmpty) return 'Too little in it to take out.';
  if (cap === 0) return 'Holds a component that this formula does not take.';
  const gives = canEmpty ? usable : most;
  if (gives < minimum && !canEmpty) return `Only ${grams(Math.max(0, cap))} g of it would fit.`;
  if (gives < worth) return `Would save ${grams(gives)} g: not worth opening.`;
  return undefined;
}
