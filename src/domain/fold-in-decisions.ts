import type { Decision, Search } from './fold-in-node.ts';

/** A candidate of which the relaxation may take more. */
export interface Column {
  candidate: number;
  /** Objective for each mg; an unopened bucket pays κ in proportion. */
  gain: number;
  upper: number;
  /** Of one bucket count for each mg. */
  uses: number;
  shares: Float64Array;
}

/** What the decisions settle, before anything is optimised. */
export interface Fixed {
  columns: readonly Column[];
  taken: Float64Array;
  /** mg of each component that the fixed part brings. */
  contents: Float64Array;
  value: number;
  stillOpenable: number;
}

/** Undefined when more buckets are opened than may be. */
export function fixDecisions(search: Search, decisions: readonly Decision[]): Fixed | undefined {
  const worth = search.problem.worthOpening;
  const taken = new Float64Array(search.candidates.length);
  const contents = new Float64Array(search.target.length);
  const columns: Column[] = [];
  let value = 0;
  let opened = 0;
  const settle = (n: number, mass: number, shares: Float64Array) => {
    taken[n] = mass;
    value += mass - worth;
    opened += 1;
    shares.forEach((share, j) => (contents[j] = (contents[j] as number) + share * mass));
  };
  search.candidates.forEach(({ usable, most, canEmpty, shares }, n) => {
    const decision = decisions[n];
    if (decision === 'emptied') settle(n, usable, shares);
    if (decision === 'partial') {
      settle(n, search.minimum, shares);
      columns.push({ candidate: n, gain: 1, upper: most - search.minimum, uses: 0, shares });
    }
    if (decision !== 'free') return;
    const upper = canEmpty ? usable : most;
    columns.push({ candidate: n, gain: 1 - worth / upper, upper, uses: 1 / upper, shares });
  });
  const stillOpenable = search.problem.maximumBuckets - opened;
  return stillOpenable < 0 ? undefined : { columns, taken, contents, value, stillOpenable };
}
