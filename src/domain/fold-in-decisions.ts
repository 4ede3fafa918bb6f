import type { Candidate, Search } from './fold-in-candidates.ts';

/** What the search has decided of a bucket: 'open' is in part or emptied, 'free' is nothing yet. */
export type Decision = 'free' | 'closed' | 'open' | 'partial' | 'emptied';
/** …and of a component's fresh ink: none, or at least what the scale can weigh. */
export type Fresh = 'free' | 'none' | 'some';

export interface Decisions {
  buckets: readonly Decision[];
  fresh: readonly Fresh[];
}

/** One more decision. */
export type Change = { bucket: number; to: Decision } | { component: number; to: Fresh };

export function withChange({ buckets, fresh }: Decisions, change: Change): Decisions {
  if ('bucket' in change) return { buckets: buckets.with(change.bucket, change.to), fresh };
  return { buckets, fresh: fresh.with(change.component, change.to) };
}

export function startOf(search: Search): Decisions {
  return {
    buckets: search.candidates.map((candidate): Decision => (candidate.mustUse ? 'emptied' : 'free')),
    fresh: search.components.map(() => 'free'),
  };
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
