import { branch, replaced, undecidedFresh } from './fold-in-branch.ts';
import type { Search } from './fold-in-candidates.ts';
import { type Relaxed, relax } from './fold-in-relaxation.ts';
import { type Rounded, roundPlan } from './fold-in-round.ts';
import type { Decision, Decisions } from './fold-in-rows.ts';

const MOST_TRIES = 6;

/** A plan near a relaxation: the buckets it takes most of, re-optimised as opened, then rounded. */
export function planNear(search: Search, relaxed: Relaxed): Rounded | undefined {
  const { taken, certificate } = relaxed;
  const settled = certificate.decisions.buckets;
  const isOpen = (n: number) => settled[n] === 'emptied' || settled[n] === 'partial';
  const order = [...taken.keys()].filter((n) => isOpen(n) || isEnough(search, n, taken[n] as number));
  order.sort((a, b) => Number(isOpen(b)) - Number(isOpen(a)) || (taken[b] as number) - (taken[a] as number));
  const kept = new Set(order.slice(0, search.problem.maximumBuckets));
  const buckets = search.candidates.map((candidate, n): Decision => {
    if (!kept.has(n)) return 'closed';
    if (isOpen(n)) return settled[n] as Decision;
    const isWhole = candidate.canEmpty && (taken[n] as number) >= candidate.usable - 1e-3;
    return isWhole || candidate.most < search.minimum ? (candidate.canEmpty ? 'emptied' : 'closed') : 'partial';
  });
  return planWith(search, { buckets, fresh: certificate.decisions.fresh }, relaxed.excesses);
}

function isEnough(search: Search, n: number, mass: number): boolean {
  const usable = search.candidates[n]?.usable ?? Infinity;
  return mass >= Math.min(search.minimum, usable) - 1e-3;
}

/** Optimised with these buckets open; components get none or enough fresh ink, whichever is nearer. */
export function planWith(search: Search, start: Decisions, excesses: Relaxed['excesses']): Rounded | undefined {
  let decisions = start;
  for (let tries = 0; tries < MOST_TRIES; tries++) {
    const relaxed = relax(search, decisions, excesses);
    if (relaxed.bound.value < -1e6 - 2 * search.greatest) return undefined;
    const plan = roundPlan(search, { ...relaxed, fresh: decisions.fresh });
    if (plan !== undefined) return plan;
    const j = undecidedFresh(search, relaxed);
    if (j === -1) return undefined;
    const ways = branch(search, relaxed);
    const better = ways.map((way) => relax(search, way, excesses)).sort((a, b) => b.bound.value - a.bound.value)[0];
    if (better === undefined) return undefined;
    decisions = { ...decisions, fresh: replaced(decisions.fresh, j, better.certificate.decisions.fresh[j] ?? 'free') };
  }
  return undefined;
}
