import { compareProducts } from './compare-products.ts';
import type { Composition } from './composition.ts';
import { type PartsPerBillion, WHOLE } from './mass.ts';

/** An exact share of a batch, from above 0 to 1: `over`/`under`, both whole. */
export interface Ratio {
  over: number;
  under: number;
}

/** A composition's components, rarest first: the one that a formula does not take soon ends the search. */
export interface Ingredients {
  ids: readonly string[];
  /** ppb of each. */
  shares: readonly number[];
}

export function ingredientsOf(composition: Composition): Ingredients {
  const sorted = [...composition].sort(([, a], [, b]) => a - b);
  return { ids: sorted.map(([id]) => id), shares: sorted.map(([, share]) => share) };
}

/** min t_j/r_j: the most of it that a batch takes when nothing may be off; undefined when nothing. */
export function strictShare({ ids, shares }: Ingredients, target: Composition): Ratio | undefined {
  let best: Ratio = { over: 1, under: 1 };
  for (let n = 0; n < ids.length; n++) {
    const most = target.get(ids[n] as string);
    if (most === undefined) return undefined;
    best = smaller(best, { over: most, under: shares[n] as number });
  }
  return best;
}

/**
 * The largest σ ≤ 1 with σr_j ≤ t_j + τ_j and Σ max(σr_j, t_j − τ_j) ≤ 1, exact (core mathematics B): the sum is convex
 * in σ, so that from above each step along its slope comes nearer, and the piece of the root is met exactly.
 */
export function tolerantShare(
  { ids, shares }: Ingredients,
  target: Composition,
  tolerance: ReadonlyMap<string, PartsPerBillion>,
): Ratio | undefined {
  let best: Ratio = { over: 1, under: 1 };
  const edges: number[] = [];
  for (let n = 0; n < ids.length; n++) {
    const id = ids[n] as string;
    const share = target.get(id) ?? 0;
    const off = tolerance.get(id) ?? 0;
    if (share + off === 0) return undefined;
    best = smaller(best, { over: share + off, under: shares[n] as number });
    edges.push(Math.max(0, share - off));
  }
  let lowest = 0;
  for (const [id, share] of target) lowest += Math.max(0, share - (tolerance.get(id) ?? 0));
  return stepDown(best, shares, edges, WHOLE - lowest);
}

/** @param room ppb that the lower edges leave free */
function stepDown(from: Ratio, shares: readonly number[], edges: readonly number[], room: number): Ratio | undefined {
  let share = from;
  for (;;) {
    let over = room;
    let under = 0;
    for (let n = 0; n < shares.length; n++) {
      const [part, edge] = [shares[n] as number, edges[n] as number];
      if (compareProducts(share.over, part, share.under, edge) <= 0) continue;
      over += edge;
      under += part;
    }
    if (compareProducts(share.over, under, share.under, over) <= 0) return share;
    if (over === 0) return undefined;
    share = { over, under };
  }
}

/** Negative when `a` is the smaller. */
export function compareRatios(a: Ratio, b: Ratio): number {
  if (a.over === b.over && a.under === b.under) return 0;
  return compareProducts(a.over, b.under, b.over, a.under);
}

function smaller(a: Ratio, b: Ratio): Ratio {
  return compareRatios(b, a) < 0 ? b : a;
}
