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
  const { worth, gains, batch } = search;
  const taken = new Float64Array(gains.length);
  const point = { taken, value: -node.opened * worth, candidate: -1, row: shortRow(search, node) };
  let count = node.opened;
  let most = OFF;
  let isPlan = point.row === -1;
  for (let k = 0; k < gains.length; k++) {
    const column = node.columns[k] as number;
    const part = column === -1 ? 0 : node.lp.value(column);
    if (part <= NOTHING) continue;
    taken[k] = part;
    const isOpened = column !== k;
    count += Number(!isOpened);
    point.value += (gains[k] as number) * part - Number(!isOpened) * worth;
    const breach = breachOf(search, k, part);
    if (breach > 0) isPlan = false;
    const open = breach + (isOpened ? 0 : openness(search, k, part));
    if (open <= most) continue;
    most = open;
    point.candidate = k;
  }
  if (!isPlan || count > batch.ask.maximumBuckets) point.value = -Infinity;
  if (point.candidate !== -1 && !search.hasPlan) point.row = -1;
  return point;
}

/** 1 when it is too little to take out, or when a sliver would stay. */
function breachOf({ limits, unit }: PricedSearch, k: number, part: number): number {
  const [least, partly, most] = [limits.least[k], limits.partly[k], limits.most[k]] as [number, number, number];
  const mass = part * unit;
  const slack = OFF * unit;
  const isShort = mass < (partly >= least ? least : most) - slack;
  const isSliver = mass > partly + slack && mass < most - slack;
  return Number(isShort || isSliver);
}

/** How far the mass is from nothing and from all, where it counts that a bucket is opened. */
function openness({ limits, unit, worth, batch }: PricedSearch, k: number, part: number): number {
  if (worth === 0 && batch.relaxation.countSlack === -1) return 0;
  const whole = (limits.most[k] as number) / unit;
  return Math.sqrt(Math.max(0, Math.min(part, whole - part)) * part);
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
