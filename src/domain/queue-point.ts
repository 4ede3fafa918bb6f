import type { Node, PricedSearch } from './queue-branch.ts';

/** Where a relaxation stands. */
export interface Point {
  taken: Float64Array;
  /** −∞ when it is no plan. */
  value: number;
  /** What to branch on: a candidate, or the row of a component whose fresh ink could not be weighed; −1 for none. */
  candidate: number;
  row: number;
}

const NOTHING = 1e-9;
const OFF = 1e-7;

export function inspectPoint(search: PricedSearch, node: Node): Point {
  const { limits, unit, worth, gains, batch } = search;
  const taken = new Float64Array(gains.length);
  let count = node.opened;
  let value = -node.opened * worth;
  let candidate = -1;
  let score = OFF;
  let isPlan = true;
  const costs = worth > 0 || batch.relaxation.countSlack !== -1;
  for (let k = 0; k < gains.length; k++) {
    const column = node.columns[k] as number;
    const part = column === -1 ? 0 : node.lp.value(column);
    if (part <= NOTHING) continue;
    taken[k] = part;
    value += (gains[k] as number) * part;
    const [least, partly, most] = [limits.least[k], limits.partly[k], limits.most[k]] as [number, number, number];
    const isOpened = column !== k;
    if (!isOpened) {
      count += 1;
      value -= worth;
    }
    const mass = part * unit;
    const slack = OFF * unit;
    const isShort = mass < (partly >= least ? least : most) - slack;
    const isSliver = mass > partly + slack && mass < most - slack;
    if (isShort || isSliver) isPlan = false;
    const off = isOpened || !costs ? 0 : Math.sqrt(Math.min(mass, most - mass) * mass) / unit;
    const total = off + Number(isShort) + Number(isSliver);
    if (total > score) {
      score = total;
      candidate = k;
    }
  }
  const row = shortRow(search, node);
  if (row !== -1 || count > batch.ask.maximumBuckets) isPlan = false;
  return { taken, value: isPlan ? value : -Infinity, candidate, row: candidate === -1 || search.hasPlan ? row : -1 };
}

/** The row of a component whose fresh ink would be more than nothing and too little to weigh. */
function shortRow({ batch, unit }: PricedSearch, { lp }: Node): number {
  const { rows, firstSlack } = batch.relaxation;
  let found = -1;
  let most = OFF;
  rows.forEach(({ kind, component }, r) => {
    if (kind !== 'fresh') return;
    const fresh = lp.value(firstSlack + r);
    const short = Math.min(fresh, (batch.leastFresh[component] as number) / unit - fresh);
    if (short <= most) return;
    most = short;
    found = r;
  });
  return found;
}
