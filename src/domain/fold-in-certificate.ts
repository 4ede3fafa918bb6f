import type { Search } from './fold-in-candidates.ts';
import type { Certificate } from './fold-in-bound.ts';

/** Multipliers are taken as whole numbers of 1/SCALE: any π ≥ 0 gives a valid bound, so rounding them loses no proof. */
const SCALE = 2n ** 34n;
const PPB = 10n ** 9n;
const UNIT = SCALE * PPB;

/**
 * The bound of a certificate in BigInt, rounded up to whole mg: R ≤ π·b + Σ of the K greatest u·max(0, v − π·r) − κ.
 * Shares no figure with the floating-point search but the multipliers.
 */
export function certify(search: Search, { decisions, rows, multipliers }: Certificate): number {
  const { problem } = search;
  const ranged = search.greatest > search.least;
  const prices = new Map<string, bigint>();
  let each = 0n;
  let ofBatch = ranged ? -UNIT : 0n;
  let value = ofBatch * BigInt(search.least);
  rows.forEach((row, n) => {
    const pi = BigInt(Math.max(0, Math.round((multipliers[n] as number) * Number(SCALE))));
    if (pi === 0n) return;
    search.components.forEach((id, j) => {
      const weight = row.weights[j] as number;
      if (weight !== 0) prices.set(id, (prices.get(id) ?? 0n) + pi * BigInt(weight));
    });
    each += pi * BigInt(row.each);
    value += pi * (BigInt(search.least) * BigInt(row.ppb) - BigInt(row.reserve) * PPB);
    ofBatch += pi * BigInt(row.ppb);
  });
  if (ofBatch > 0n) value += BigInt(search.greatest - search.least) * ofBatch;
  const open: bigint[] = [];
  search.candidates.forEach((candidate, n) => {
    const decision = decisions.buckets[n];
    if (decision === 'closed') return;
    const gain = gainOf(problem.buckets[candidate.index]?.composition, prices, each);
    const score = scoreOf(search, n, decision, gain) - BigInt(problem.worthOpening) * UNIT;
    if (decision === 'free') open.push(score);
    else value += score;
  });
  const opened = decisions.buckets.filter((decision) => decision === 'emptied' || decision === 'partial').length;
  open.sort((a, b) => (a < b ? 1 : a > b ? -1 : 0));
  for (const score of open.slice(0, Math.max(0, problem.maximumBuckets - opened))) if (score > 0n) value += score;
  return Number(value >= 0n ? (value + UNIT - 1n) / UNIT : value / UNIT);
}

/** v − π·r for each mg, in UNIT. */
function gainOf(
  composition: ReadonlyMap<string, number> | undefined,
  prices: ReadonlyMap<string, bigint>,
  each: bigint,
): bigint {
  let gain = UNIT - each * PPB;
  for (const [id, share] of composition ?? []) gain -= (prices.get(id) ?? 0n) * BigInt(share);
  return gain;
}

function scoreOf(search: Search, n: number, decision: string | undefined, gain: bigint): bigint {
  const candidate = search.candidates[n];
  if (candidate === undefined) return 0n;
  const emptied = gain * BigInt(candidate.usable);
  const partly = gain * BigInt(gain > 0n ? candidate.most : search.minimum);
  if (decision === 'emptied') return emptied;
  if (decision === 'partial') return partly;
  const ways = [...(candidate.canEmpty ? [emptied] : []), ...(candidate.most >= search.minimum ? [partly] : [])];
  return ways.reduce((most, way) => (way > most ? way : most), 0n);
}
