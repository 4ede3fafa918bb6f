import { contentsOf, fillPot } from './fill-pot.ts';
import type { FoldInPlan } from './fold-in.ts';
import type { Candidate, Search } from './fold-in-candidates.ts';
import type { Fresh } from './fold-in-decisions.ts';
import { type Milligrams, WHOLE } from './mass.ts';
import { verifyPlan } from './verify-plan.ts';

/** A whole plan on the scale's steps; status and bound are the search's to say. */
export type Rounded = Pick<FoldInPlan, 'batch' | 'reused' | 'objective' | 'fromBuckets' | 'fresh'>;

interface Amounts {
  taken: Float64Array;
  batch: number;
  fresh: readonly Fresh[];
}

/**
 * The plan of these amounts on the scale's steps: an emptied bucket exactly, others floored (or a step more where
 * that alone makes a plan), fresh ink min-max rounded and either nothing or enough to weigh. Undefined when no such plan verifies.
 */
export function roundPlan(search: Search, { taken, batch, fresh }: Amounts): Rounded | undefined {
  const d = search.problem.readability;
  const amounts = search.candidates.map((candidate, n) => amountOf(candidate, taken[n] as number, search.minimum, d));
  const lowest = Math.min(search.greatest, Math.max(search.least, Math.ceil(batch / d - 1e-6) * d));
  for (;;) {
    // In a range, amounts rounded down may leave room for a step or two more.
    for (let wanted = lowest; wanted <= Math.min(search.greatest, lowest + 2 * d); wanted += d) {
      const plan = fillUp(search, amounts, wanted as Milligrams, fresh);
      if (plan !== undefined) return plan;
    }
    if (!raiseOne(search, amounts)) return undefined;
  }
}

interface Amount {
  mass: number;
  empties: boolean;
  /** What rounding down has left off. */
  lost: number;
}

/** What is rounded down may leave less than can be weighed of something: then the one that lost most gets a step. */
function raiseOne(search: Search, amounts: (Amount | undefined)[]): boolean {
  let raised: Amount | undefined;
  amounts.forEach((amount, n) => {
    const most = search.candidates[n]?.most ?? 0;
    const d = search.problem.readability;
    if (amount === undefined || amount.empties || amount.lost < 1e-3 || amount.mass + d > most) return;
    if (raised === undefined || amount.lost > raised.lost) raised = amount;
  });
  if (raised === undefined) return false;
  raised.mass += search.problem.readability;
  raised.lost = 0;
  return true;
}

function fillUp(
  search: Search,
  amounts: readonly (Amount | undefined)[],
  batch: Milligrams,
  fresh: readonly Fresh[],
): Rounded | undefined {
  const fromBuckets: FoldInPlan['fromBuckets'][number][] = [];
  const sources: Parameters<typeof contentsOf>[0][number][] = [];
  amounts.forEach((amount, n) => {
    const bucket = search.problem.buckets[search.candidates[n]?.index ?? -1];
    if (bucket === undefined || amount === undefined) return;
    const mass = amount.mass as Milligrams;
    fromBuckets.push({ bucketId: bucket.id, mass, empties: amount.empties });
    sources.push({ composition: bucket.composition, mass });
  });
  const filled = fillWeighable(search, contentsOf(sources), batch, fresh);
  const plan = filled && finish(search, fromBuckets, filled);
  return plan && verifies(search, plan) ? plan : undefined;
}

function verifies(search: Search, plan: Rounded): boolean {
  return verifyPlan(search.problem, { ...plan, status: 'gap', objectiveBound: plan.objective, excluded: [] }).ok;
}

function amountOf(candidate: Candidate, taken: number, minimum: number, d: number): Amount | undefined {
  if (candidate.canEmpty && taken >= candidate.usable - 1e-3) return { mass: candidate.usable, empties: true, lost: 0 };
  const exact = Math.min(taken, candidate.most) + 1e-3;
  const mass = Math.floor(exact / d) * d;
  return mass < minimum ? undefined : { mass, empties: false, lost: exact - mass };
}

/** Fills up, and as long as some component would get too little to weigh, gives it none or enough. */
function fillWeighable(
  search: Search,
  contents: ReadonlyMap<string, bigint>,
  batch: Milligrams,
  decided: readonly Fresh[],
): Map<string, Milligrams> | undefined {
  const { problem, components } = search;
  const settled = new Set(components.filter((_, j) => decided[j] === 'none'));
  const least = new Map<string, Milligrams>();
  const demand = (id: string) => least.set(id, leastWeighed(search, id, batch));
  components.forEach((id, j) => decided[j] === 'some' && demand(id));
  const pot = { target: problem.target, tolerance: problem.tolerance, contents, readability: problem.readability };
  for (let tries = 0; tries <= 2 * components.length; tries++) {
    const fresh = fillPot({ ...pot, settled, least }, batch);
    if (fresh === undefined) return undefined;
    const short = [...fresh].find(([id, mass]) => mass > 0 && mass < leastWeighed(search, id, batch));
    if (short === undefined) return fresh;
    const [id, mass] = short;
    if (2 * mass < leastWeighed(search, id, batch) && !least.has(id)) settled.add(id);
    else if (!settled.has(id)) demand(id);
    else return undefined;
  }
  return undefined;
}

/** m_j = min(m, M·t_j), on a step below. */
function leastWeighed({ problem }: Search, id: string, batch: number): Milligrams {
  const share = problem.target.get(id) ?? 0;
  const least = Math.min(problem.minimumFresh, (batch * share) / WHOLE);
  return (Math.floor(least / problem.readability) * problem.readability) as Milligrams;
}

function finish(search: Search, fromBuckets: Rounded['fromBuckets'], fresh: Map<string, Milligrams>): Rounded {
  const reused = fromBuckets.reduce((sum, from) => sum + from.mass, 0);
  const freshMass = [...fresh.values()].reduce((sum, mass) => sum + mass, 0);
  const paid = search.problem.worthOpening * fromBuckets.length;
  const saved = search.greatest > search.least ? 0 - freshMass : reused;
  return {
    batch: (reused + freshMass) as Milligrams,
    reused: reused as Milligrams,
    objective: (saved - paid) as Milligrams,
    fromBuckets,
    fresh: new Map([...fresh].filter(([, mass]) => mass > 0)),
  };
}
