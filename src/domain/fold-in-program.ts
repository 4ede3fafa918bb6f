import type { Search } from './fold-in-candidates.ts';
import { mostOf } from './fold-in-decisions.ts';
import { WHOLE } from './mass.ts';
import type { BoxedProgram } from './tableau.ts';

/**
 * One condition on what is taken: slack + Σ_i x_i·(share of `component`, or of all `foreign` ones) + Σ of the deviations
 * = M·ppb/10⁹, of which the slack lies between `lower` and `upper` mg. Whole numbers, so that a bound made of such rows
 * can be computed exactly.
 */
export interface Row {
  /** What the slack is: fresh ink, the room for a foreign component, nothing, the room of a deviation. */
  kind: 'fresh' | 'foreign' | 'sum' | 'above' | 'below';
  component: number;
  /** Right side in ppb of the batch. */
  ppb: number;
  /** ppb of the greatest batch: the most that the slack can be. */
  most: number;
}

/**
 * The linear relaxation: columns are what is taken of each candidate, the deviation of each component that has a
 * tolerance, and the batch beyond its least; masses as parts of the greatest batch.
 */
export interface Relaxation {
  program: BoxedProgram;
  rows: readonly Row[];
  /** Components that may deviate; their columns follow those of the candidates. */
  deviating: readonly number[];
  isRanged: boolean;
  /** Where things stand among the variables: slacks by row, the slack of the count (−1 without one), variants. */
  firstSlack: number;
  countSlack: number;
  firstVariant: number;
}

export function relaxationOf(search: Search): Relaxation {
  const { candidates, components, target, lower, upper, problem } = search;
  const isRanged = search.greatest > search.least;
  const all = [...components.keys()];
  const deviating = all.filter((j) => (target[j] as number) > 0 && upper[j] !== lower[j]);
  const rows = rowsOf(search, deviating, isRanged);
  const isCounted = problem.maximumBuckets < candidates.length;
  const n = candidates.length;
  const width = n + deviating.length + Number(isRanged);
  const height = rows.length + Number(isCounted);
  const matrix = new Float64Array(height * width);
  const right = new Float64Array(height);
  const bounds = { lower: new Float64Array(width + height), upper: new Float64Array(width + height) };
  const gains = new Float64Array(width);
  const unit = search.greatest;
  candidates.forEach((candidate, i) => {
    const most = mostOf(candidate);
    gains[i] = 1 - problem.worthOpening / most;
    bounds.upper[i] = most / unit;
    rows.forEach((row, r) => (matrix[r * width + i] = shareIn(search, row, i)));
    if (isCounted) matrix[rows.length * width + i] = unit / most;
  });
  deviating.forEach((j, k) => {
    bounds.lower[n + k] = ((lower[j] as number) - (target[j] as number)) / WHOLE;
    bounds.upper[n + k] = ((upper[j] as number) - (target[j] as number)) / WHOLE;
    rows.forEach((row, r) => (matrix[r * width + n + k] = deviationIn(row, j)));
  });
  if (isRanged) {
    gains[width - 1] = -1;
    bounds.upper[width - 1] = (search.greatest - search.least) / unit;
  }
  rows.forEach((row, r) => {
    right[r] = (row.ppb / WHOLE) * (search.least / unit);
    if (isRanged) matrix[r * width + width - 1] = -row.ppb / WHOLE;
    bounds.upper[width + r] = row.most / WHOLE;
  });
  if (isCounted) {
    right[rows.length] = problem.maximumBuckets;
    bounds.upper[width + rows.length] = problem.maximumBuckets;
  }
  return {
    program: { matrix, right, gains, ...bounds },
    rows,
    deviating,
    isRanged,
    firstSlack: width,
    countSlack: isCounted ? width + rows.length : -1,
    firstVariant: width + height,
  };
}

function rowsOf(search: Search, deviating: readonly number[], isRanged: boolean): Row[] {
  const { components, target, lower, upper } = search;
  const of = (values: Float64Array, j: number) => values[j] as number;
  const rows = components.map((_, component): Row => {
    const most = of(upper, component);
    const isFresh = of(target, component) > 0;
    return { kind: isFresh ? 'fresh' : 'foreign', component, ppb: isFresh ? of(target, component) : most, most };
  });
  // Where nothing deviates, nothing foreign has room: the rows of the components already add up to the batch.
  if (deviating.length > 0 || rows.some((row) => row.kind === 'foreign'))
    rows.push({ kind: 'sum', component: -1, ppb: 0, most: 0 });
  if (!isRanged) return rows;
  for (const j of deviating) {
    const above = of(upper, j) - of(target, j);
    const below = of(target, j) - of(lower, j);
    rows.push({ kind: 'above', component: j, ppb: above, most: above + below });
    rows.push({ kind: 'below', component: j, ppb: below, most: above + below });
  }
  return rows;
}

/** What a mg of a candidate counts in a row. */
function shareIn({ candidates, target }: Search, { kind, component }: Row, i: number): number {
  const shares = candidates[i]?.shares ?? new Float64Array();
  if (kind === 'above' || kind === 'below') return 0;
  if (kind !== 'sum') return shares[component] as number;
  return shares.reduce((sum, share, j) => (target[j] === 0 ? sum + share : sum), 0);
}

/** What a mg of a component's deviation counts in a row. */
export function deviationIn({ kind, component }: Row, j: number): number {
  if (kind === 'sum') return 1;
  if (component !== j) return 0;
  return kind === 'above' ? 1 : -1;
}
