import type { Candidate, Search } from './fold-in-candidates.ts';
import { type Decision, type Decisions, isOpened, leastFreshOf } from './fold-in-decisions.ts';
import { type Relaxation, type Row, deviationIn } from './fold-in-program.ts';
import { WHOLE } from './mass.ts';

/** Any multipliers of the rows: with the decisions they are a certificate that anyone can evaluate. */
export interface Certificate {
  decisions: Decisions;
  multipliers: Float64Array;
}

export interface Bound {
  /** mg; no plan under the decisions has a greater objective. */
  value: number;
  /** mg that each candidate adds to the bound when it is opened; −∞ for one that is closed. */
  scores: Float64Array;
  /** The least score that is counted: 0 or more. */
  counted: number;
}

/**
 * Weak duality: whatever π, the objective is at most π·b + Σ over slacks and deviations of the better end of their range
 * + Σ of the K greatest scores of buckets. In floating point: steers, does not prove.
 */
export function boundOf(search: Search, relaxation: Relaxation, { decisions, multipliers }: Certificate): Bound {
  const { rows, deviating } = relaxation;
  let value = relaxation.isRanged ? -search.least : 0;
  let ofBatch = -1;
  for (let r = 0; r < rows.length; r++) {
    const pi = multipliers[r] as number;
    if (pi === 0) continue;
    const row = rows[r] as Row;
    const { least, most } = slackLimits(search, row, decisions);
    value += (pi * row.ppb * search.least) / WHOLE - pi * (pi > 0 ? least : most);
    ofBatch += (pi * row.ppb) / WHOLE;
  }
  if (relaxation.isRanged)
    value += ofBatch * ((ofBatch > 0 ? decisions.batch.greatest : decisions.batch.least) - search.least);
  for (const j of deviating) {
    let gain = 0;
    for (let r = 0; r < rows.length; r++) {
      const pi = multipliers[r] as number;
      if (pi !== 0) gain -= pi * deviationIn(rows[r] as Row, j);
    }
    const edge = ((gain > 0 ? search.upper[j] : search.lower[j]) as number) - (search.target[j] as number);
    value += (gain * edge * search.greatest) / WHOLE;
  }
  const scores = gainsOf(relaxation, multipliers, search.candidates.length);
  let left = search.problem.maximumBuckets;
  for (let i = 0; i < scores.length; i++) {
    const decision = decisions.buckets[i] as Decision;
    const candidate = search.candidates[i] as Candidate;
    const score =
      decision === 'closed'
        ? -Infinity
        : scoreOf(candidate, decision, scores[i] as number, search.minimum) - search.problem.worthOpening;
    scores[i] = score;
    if (!isOpened(decision)) continue;
    value += score;
    left -= 1;
  }
  return { ...addGreatest(value, scores, decisions, left), scores };
}

/** What a mg of each candidate gains beside what its components are priced at. */
function gainsOf({ program, rows }: Relaxation, multipliers: Float64Array, candidates: number): Float64Array {
  const { matrix } = program;
  const gains = new Float64Array(candidates).fill(1);
  for (let r = 0, at = 0; r < rows.length; r++, at += program.gains.length) {
    const pi = multipliers[r] as number;
    if (pi === 0) continue;
    for (let i = 0; i < candidates; i++) gains[i] = (gains[i] as number) - pi * (matrix[at + i] as number);
  }
  return gains;
}

/** mg between which a slack lies. */
export function slackLimits(search: Search, row: Row, decisions: Decisions): { least: number; most: number } {
  const most = (row.most * search.greatest) / WHOLE;
  const fresh = decisions.fresh[row.component];
  if (row.kind !== 'fresh' || fresh === 'free') return { least: 0, most };
  if (fresh === 'none') return { least: 0, most: 0 };
  const least = leastFreshOf(search, row.component, decisions);
  return { least, most: Math.max(least, most) };
}

function scoreOf({ canEmpty, usable, most }: Candidate, decision: Decision, gain: number, minimum: number): number {
  if (decision === 'emptied') return gain * usable;
  const partly = most >= minimum ? gain * (gain > 0 ? most : minimum) : -Infinity;
  return decision === 'partial' || !canEmpty ? partly : Math.max(partly, gain * usable);
}

function addGreatest(value: number, scores: Float64Array, { buckets }: Decisions, left: number): Omit<Bound, 'scores'> {
  if (left < 0) return { value: -Infinity, counted: 0 };
  const gained: number[] = [];
  for (let i = 0; i < scores.length; i++) {
    const score = scores[i] as number;
    if (score > 0 && buckets[i] === 'free') gained.push(score);
  }
  gained.sort((a, b) => b - a);
  const counted = Math.min(gained.length, left);
  let sum = value;
  for (let n = 0; n < counted; n++) sum += gained[n] as number;
  return { value: sum, counted: gained.length >= left ? (gained[left - 1] ?? 0) : 0 };
}
