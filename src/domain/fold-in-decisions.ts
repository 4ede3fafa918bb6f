import type { Candidate, Search } from './fold-in-candidates.ts';
import { WHOLE } from './mass.ts';

/** What the search has decided of a bucket: 'open' is in part or emptied, 'free' is nothing yet. */
export type Decision = 'free' | 'closed' | 'open' | 'partial' | 'emptied';
/** …and of a component's fresh ink: none, or at least what the scale can weigh. */
export type Fresh = 'free' | 'none' | 'some';

export interface Decisions {
  buckets: readonly Decision[];
  fresh: readonly Fresh[];
  /** mg between which the batch lies. */
  batch: { least: number; greatest: number };
}

/** One more decision. */
export type Change =
  { bucket: number; to: Decision } | { component: number; to: Fresh } | { batch: Decisions['batch'] };

export function withChange(decisions: Decisions, change: Change): Decisions {
  const { buckets, fresh } = decisions;
  if ('bucket' in change) return { ...decisions, buckets: replaced(buckets, change.bucket, change.to) };
  if ('component' in change) return { ...decisions, fresh: replaced(fresh, change.component, change.to) };
  return { ...decisions, batch: change.batch };
}

function replaced<T>(list: readonly T[], at: number, by: T): T[] {
  const copy = list.slice();
  copy[at] = by;
  return copy;
}

/** m_j = min(m, M·t_j) in mg of the least batch that is left: fresh ink of a component is nothing, or at least this. */
export function leastFreshOf({ problem, target }: Search, j: number, { batch }: Pick<Decisions, 'batch'>): number {
  return Math.min(problem.minimumFresh, Math.floor((batch.least * (target[j] as number)) / WHOLE));
}

export function undecided({ candidates, components, least, greatest }: Search): Decisions {
  return {
    buckets: candidates.map((): Decision => 'free'),
    fresh: components.map((): Fresh => 'free'),
    batch: { least, greatest },
  };
}

export function startOf(search: Search): Decisions {
  const buckets = search.candidates.map((candidate): Decision => (candidate.mustUse ? 'emptied' : 'free'));
  return { ...undecided(search), buckets };
}

export function isOpened(decision: Decision | undefined): boolean {
  return decision === 'open' || decision === 'partial' || decision === 'emptied';
}

/** mg: the most that comes from a bucket in any way. */
export function mostOf({ canEmpty, usable, most, mustUse }: Candidate): number {
  return canEmpty || mustUse ? usable : most;
}

/** mg between which an opened bucket gives; for 'open' the sliver that may not stay is inside. */
export function limitsOf(candidate: Candidate, decision: Decision, minimum: number): { least: number; most: number } {
  const { canEmpty, usable, most } = candidate;
  if (decision === 'emptied') return { least: usable, most: usable };
  if (decision === 'partial' || !canEmpty) return { least: minimum, most };
  return { least: most >= minimum ? Math.min(minimum, usable) : usable, most: usable };
}
