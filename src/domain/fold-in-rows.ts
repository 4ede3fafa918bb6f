import type { Search } from './fold-in-candidates.ts';
import { WHOLE } from './mass.ts';

/** What the search has decided of a candidate; 'free' is still open. */
export type Decision = 'free' | 'closed' | 'partial' | 'emptied';
/** …and of a component's fresh ink: none, or at least what the scale can weigh. */
export type Fresh = 'free' | 'none' | 'some';

export interface Decisions {
  buckets: readonly Decision[];
  fresh: readonly Fresh[];
}

/**
 * One linear condition on the masses taken: Σ_i x_i (Σ_j weights_j r_ij + each) ≤ M·ppb/10⁹ − reserve. Whole numbers
 * only, so that a bound made of such rows can be computed exactly.
 */
export interface Row {
  weights: Int8Array;
  each: number;
  ppb: number;
  /** mg */
  reserve: number;
}

/** The upper edge of each tolerance, and what 'none' and 'some' ask for. y is eliminated. */
export function edgeRows(search: Search, { fresh }: Decisions): Row[] {
  const rows: Row[] = [];
  const { components, upper, lower } = search;
  components.forEach((_, j) => {
    rows.push({ weights: only(search, j, 1), each: 0, ppb: upper[j] as number, reserve: reserveOf(search, fresh, j) });
    if (fresh[j] === 'none' && (lower[j] as number) > 0)
      rows.push({ weights: only(search, j, -1), each: 0, ppb: -(lower[j] as number), reserve: 0 });
  });
  if (fresh.includes('none')) rows.push(restRow(search, fresh));
  return rows;
}

/** Fresh ink of the components that may still have some makes up the batch: M − Σx ≤ Σ (M(t + τ) − held). */
function restRow(search: Search, fresh: readonly Fresh[]): Row {
  const weights = new Int8Array(fresh.length);
  let ppb = -WHOLE;
  fresh.forEach((decision, j) => {
    if (decision === 'none' || search.target[j] === 0) return;
    weights[j] = 1;
    ppb += search.upper[j] as number;
  });
  return { weights, each: -1, ppb, reserve: 0 };
}

/**
 * What is over in some components must be left out of others: Σ_j max(M(t − τ), held + reserve) ≤ M, of which this is
 * the condition for one set of components in excess.
 */
export function excessRow(search: Search, { fresh }: Decisions, excess: readonly boolean[]): Row {
  const weights = new Int8Array(excess.length);
  let ppb: number = WHOLE;
  let reserve = 0;
  excess.forEach((over, j) => {
    if (over) {
      weights[j] = 1;
      reserve += reserveOf(search, fresh, j);
    } else ppb -= search.lower[j] as number;
  });
  return { weights, each: 0, ppb, reserve };
}

export function reserveOf(search: Search, fresh: readonly Fresh[], j: number): number {
  return fresh[j] === 'some' ? (search.leastFresh[j] as number) : 0;
}

function only(search: Search, j: number, weight: number): Int8Array {
  const weights = new Int8Array(search.components.length);
  weights[j] = weight;
  return weights;
}
