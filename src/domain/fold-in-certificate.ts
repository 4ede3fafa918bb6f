import type { Search } from './fold-in-candidates.ts';
import type { Certificate } from './fold-in-bound.ts';
import { type Decision, type Decisions, isOpened, leastFreshOf } from './fold-in-decisions.ts';
import { type Relaxation, type Row, deviationIn } from './fold-in-program.ts';

/** Multipliers are taken as whole numbers of 1/SCALE: any multipliers give a bound, so rounding them loses no proof. */
const SCALE = 2n ** 34n;
const PPB = 10n ** 9n;
const UNIT = SCALE * PPB;

/**
 * The bound of a certificate in BigInt, rounded up to whole mg: for any multipliers π the objective is at most
 * π·b + Σ over slacks and deviations of the better end of their range + Σ of the K greatest scores of buckets.
 * Shares no figure with the floating-point search but the multipliers.
 */
export function certify(search: Search, { rows, deviating }: Relaxation, certificate: Certificate): number {
  const { problem } = search;
  const { decisions } = certificate;
  const multipliers = Array.from(certificate.multipliers, (pi) => BigInt(Math.round(pi * Number(SCALE))));
  const least = BigInt(search.least);
  const greatest = BigInt(search.greatest);
  let value = greatest > least ? -UNIT * least : 0n;
  let ofBatch = -UNIT;
  rows.forEach((row, r) => {
    const pi = multipliers[r] as bigint;
    const slack = slackRange(search, row, decisions);
    value += pi * BigInt(row.ppb) * least - pi * (pi > 0n ? slack.least : slack.most);
    ofBatch += pi * BigInt(row.ppb);
  });
  if (greatest > least)
    value += ofBatch * (BigInt(ofBatch > 0n ? decisions.batch.greatest : decisions.batch.least) - least);
  for (const j of deviating) {
    const gain = rows.reduce((sum, row, r) => sum - (multipliers[r] as bigint) * BigInt(deviationIn(row, j)), 0n);
    const edge = BigInt((gain > 0n ? search.upper[j] : search.lower[j]) as number) - BigInt(search.target[j] as number);
    value += gain * edge * greatest;
  }
  const { opened, free } = scoresOf(search, rows, multipliers, decisions.buckets);
  for (const score of opened) value += score;
  free.sort((a, b) => (a < b ? 1 : a > b ? -1 : 0));
  for (const score of free.slice(0, Math.max(0, problem.maximumBuckets - opened.length))) value += score;
  return Number(value >= 0n ? (value + UNIT - 1n) / UNIT : value / UNIT);
}

/** mg·ppb between which a slack lies. */
function slackRange(search: Search, row: Row, decisions: Decisions): { least: bigint; most: bigint } {
  const most = BigInt(row.most) * BigInt(search.greatest);
  const fresh = decisions.fresh[row.component];
  if (row.kind !== 'fresh' || fresh === 'free') return { least: 0n, most };
  if (fresh === 'none') return { least: 0n, most: 0n };
  const least = BigInt(leastFreshOf(search, row.component, decisions)) * PPB;
  return { least, most: most > least ? most : least };
}

/** What opened buckets add, and what those add that may still be opened, where that is more than nothing. */
function scoresOf(search: Search, rows: readonly Row[], multipliers: readonly bigint[], buckets: readonly Decision[]) {
  const opened: bigint[] = [];
  const free: bigint[] = [];
  search.candidates.forEach((candidate, i) => {
    const decision = buckets[i] as Decision;
    if (decision === 'closed') return;
    const composition = search.problem.buckets[candidate.index]?.composition ?? new Map<string, number>();
    let gain = UNIT;
    for (const [id, share] of composition) {
      const j = search.components.indexOf(id);
      rows.forEach((row, r) => {
        const counts = row.kind === 'sum' ? search.target[j] === 0 : row.component === j && isOfComponent(row);
        if (counts) gain -= (multipliers[r] as bigint) * BigInt(share);
      });
    }
    const emptied = gain * BigInt(candidate.usable);
    const partly = gain * BigInt(gain > 0n ? candidate.most : search.minimum);
    const ways: bigint[] = [];
    if (decision === 'emptied' || (decision !== 'partial' && candidate.canEmpty)) ways.push(emptied);
    if (decision !== 'emptied' && candidate.most >= search.minimum) ways.push(partly);
    if (ways.length === 0) return;
    const score = ways.reduce((a, b) => (a > b ? a : b)) - BigInt(search.problem.worthOpening) * UNIT;
    if (isOpened(decision)) opened.push(score);
    else if (score > 0n) free.push(score);
  });
  return { opened, free };
}

function isOfComponent({ kind }: Row): boolean {
  return kind === 'fresh' || kind === 'foreign';
}
