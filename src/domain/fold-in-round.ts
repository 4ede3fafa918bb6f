import { contentsOf, fillPot } from './fill-pot.ts';
import type { FoldInPlan } from './fold-in.ts';
import type { Search } from './fold-in-node.ts';
import { type Milligrams, WHOLE } from './mass.ts';
import { verifyPlan } from './verify-plan.ts';

/** A whole plan on the scale's steps; status and bound are the search's to say. */
export type Rounded = Pick<FoldInPlan, 'batch' | 'reused' | 'objective' | 'fromBuckets' | 'fresh'>;

/**
 * The plan of these amounts on the scale's steps: an emptied bucket exactly, others floored, fresh ink min-max rounded.
 * @returns the plan when it verifies, else the components of which too little fresh ink would be weighed
 */
export function roundPlan(
  search: Search,
  taken: Float64Array,
  batch: number,
): { plan: Rounded } | { tooLittle: readonly number[] } {
  const { problem } = search;
  const d = problem.readability;
  const fromBuckets = search.candidates.flatMap((candidate, n) => {
    const bucket = problem.buckets[candidate.index];
    const from = amountOf(candidate, taken[n] as number, search.minimum, d);
    return bucket === undefined || from === undefined ? [] : [{ bucketId: bucket.id, ...from }];
  });
  const composition = new Map(problem.buckets.map((bucket) => [bucket.id, bucket.composition]));
  const sources = fromBuckets.map((from) => ({
    mass: from.mass,
    composition: composition.get(from.bucketId) ?? new Map(),
  }));
  const wanted = Math.min(search.greatest, Math.max(search.least, Math.ceil(batch / d - 1e-6) * d)) as Milligrams;
  const pot = { target: problem.target, tolerance: problem.tolerance, contents: contentsOf(sources), readability: d };
  const fresh = fillPot(pot, wanted);
  if (fresh === undefined) return { tooLittle: [] };
  const plan = finished(search, fromBuckets, fresh);
  if (verifyPlan(problem, { ...plan, status: 'gap', objectiveBound: plan.objective, excluded: [] }).ok) return { plan };
  return { tooLittle: tooLittleFresh(search, fresh, wanted) };
}

function amountOf(
  candidate: Search['candidates'][number],
  taken: number,
  minimum: number,
  d: number,
): { mass: Milligrams; empties: boolean } | undefined {
  if (candidate.canEmpty && taken >= candidate.usable - 1)
    return { mass: candidate.usable as Milligrams, empties: true };
  const mass = Math.floor((Math.min(taken, candidate.most) + 1e-3) / d) * d;
  return mass < minimum ? undefined : { mass: mass as Milligrams, empties: false };
}

function finished(search: Search, fromBuckets: Rounded['fromBuckets'], fresh: Map<string, Milligrams>): Rounded {
  const reused = fromBuckets.reduce((sum, from) => sum + from.mass, 0);
  const freshMass = [...fresh.values()].reduce((sum, mass) => sum + mass, 0);
  const paid = search.problem.worthOpening * fromBuckets.length;
  const kept = new Map([...fresh].filter(([, mass]) => mass > 0));
  return {
    batch: (reused + freshMass) as Milligrams,
    reused: reused as Milligrams,
    objective: ((search.greatest > search.least ? -freshMass : reused) - paid) as Milligrams,
    fromBuckets,
    fresh: kept,
  };
}

function tooLittleFresh(search: Search, fresh: ReadonlyMap<string, Milligrams>, batch: number): number[] {
  return search.components.flatMap((id, j) => {
    const mass = fresh.get(id) ?? 0;
    return mass > 0 && mass < leastFresh(search, j, batch) ? [j] : [];
  });
}

/** m_j = min(m, M·t_j), on a step below. */
export function leastFresh(search: Search, j: number, batch: number): number {
  const { problem } = search;
  const share = problem.target.get(search.components[j] as string) ?? 0;
  return (
    Math.floor(Math.min(problem.minimumFresh, (batch * share) / WHOLE) / problem.readability) * problem.readability
  );
}
