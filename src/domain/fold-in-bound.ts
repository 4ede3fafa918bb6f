import type { Search } from './fold-in-candidates.ts';
import type { Decisions, Row } from './fold-in-rows.ts';
import { WHOLE } from './mass.ts';

/** Multipliers π ≥ 0 of rows: with the decisions they are a certificate that anyone can evaluate. */
export interface Certificate {
  decisions: Decisions;
  rows: readonly Row[];
  multipliers: readonly number[];
}

export interface Bound {
  /** mg; no plan under the decisions has a greater objective. */
  value: number;
  /** mg that each candidate adds to the bound when it is opened; −∞ for one that is closed. */
  scores: Float64Array;
  /** The least score that is counted, and the greatest that is not: both 0 or more. */
  counted: number;
  next: number;
}

/** R ≤ π·b + Σ of the K greatest u·max(0, v − π·r) − κ, in floating point: steers, does not prove. */
export function boundOf(search: Search, { decisions, rows, multipliers }: Certificate): Bound {
  const { problem, candidates, minimum } = search;
  const prices = new Float64Array(search.components.length);
  let each = 0;
  let value = 0;
  let ofBatch = search.greatest > search.least ? -1 : 0;
  value += ofBatch * search.least;
  rows.forEach((row, n) => {
    const pi = multipliers[n] as number;
    if (pi === 0) return;
    row.weights.forEach((weight, j) => (prices[j] = (prices[j] as number) + pi * weight));
    each += pi * row.each;
    value += pi * ((search.least * row.ppb) / WHOLE - row.reserve);
    ofBatch += (pi * row.ppb) / WHOLE;
  });
  value += (search.greatest - search.least) * Math.max(0, ofBatch);
  const scores = new Float64Array(candidates.length).fill(-Infinity);
  let left = problem.maximumBuckets;
  candidates.forEach((candidate, n) => {
    const decision = decisions.buckets[n];
    if (decision === 'closed') return;
    let gain = 1 - each;
    candidate.shares.forEach((share, j) => (gain -= share * (prices[j] as number)));
    const partly = gain * (gain > 0 ? candidate.most : minimum);
    const score = bestWay(decision, candidate.canEmpty, candidate.most >= minimum, gain * candidate.usable, partly);
    scores[n] = score - problem.worthOpening;
    if (decision === 'free') return;
    value += scores[n] as number;
    left -= 1;
  });
  return { ...addBest(value, scores, decisions, left), scores };
}

function bestWay(
  decision: string | undefined,
  canEmpty: boolean,
  canTake: boolean,
  emptied: number,
  partly: number,
): number {
  if (decision === 'emptied') return emptied;
  if (decision === 'partial') return partly;
  return Math.max(canEmpty ? emptied : -Infinity, canTake ? partly : -Infinity);
}

function addBest(
  value: number,
  scores: Float64Array,
  decisions: Decisions,
  left: number,
): Pick<Bound, 'value' | 'counted' | 'next'> {
  if (left < 0) return { value: -Infinity, counted: 0, next: 0 };
  const open = [...scores].filter((score, n) => decisions.buckets[n] === 'free' && score > 0).sort((a, b) => b - a);
  const counted = open.slice(0, left).reduce((sum, score) => sum + score, 0);
  return {
    value: value + counted,
    counted: open.length >= left ? (open[left - 1] ?? 0) : 0,
    next: open[left] ?? 0,
  };
}
