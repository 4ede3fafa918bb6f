import type { OperationType } from '#contract/operation-bodies.ts';
import { type Role, mayRecord } from '#contract/roles.ts';
import type { Row } from '#contract/rows.ts';

export type Act = 'use-up' | 'issue' | 'return' | 'reweigh' | 'release' | 'label' | 'discard';

const RECORDS: Record<Exclude<Act, 'label'>, OperationType> = {
  'use-up': 'batch-mixed',
  issue: 'bucket-issued',
  return: 'bucket-returned',
  reweigh: 'bucket-recounted',
  release: 'batch-released',
  discard: 'bucket-discarded',
};

/** In the order of the keys; the first is the screen's one primary action. */
const BY_STATE: Record<Row<'buckets'>['state'], readonly Act[]> = {
  shelf: ['use-up', 'issue', 'return', 'reweigh', 'label', 'discard'],
  'at-press': ['return', 'reweigh', 'label', 'discard'],
  quarantine: ['reweigh', 'label', 'discard'],
  empty: ['return'],
  discarded: [],
};

type Tub = Pick<Row<'buckets'>, 'state' | 'released' | 'needsRecount' | 'batchId' | 'grade'>;

/** What this person may do with a tub where it is now. */
export function actsFor(tub: Tub, role: Role): readonly Act[] {
  const acts = possibleFor(tub).filter((act) => fits(act, tub, role));
  if (tub.needsRecount && acts.includes('reweigh')) return ['reweigh', ...acts.filter((act) => act !== 'reweigh')];
  if (!tub.released && tub.batchId !== null && tub.state === 'shelf' && mayRelease(role)) return ['release', ...acts];
  return acts;
}

/** Gone by one device's books and used by another's: it is weighed if it is there, and discarded once more if it is not. */
function possibleFor({ state, needsRecount }: Tub): readonly Act[] {
  const isGone = state === 'empty' || state === 'discarded';
  return isGone && needsRecount ? ['reweigh', ...BY_STATE[state], 'discard'] : BY_STATE[state];
}

/** Those who may release may also issue unreleased ink, with a named reason. */
export function mayRelease(role: Role): boolean {
  return mayRecord(role, 'batch-released');
}

function fits(act: Act, tub: Tub, role: Role): boolean {
  if (act === 'label') return true;
  if (act === 'use-up' && (!tub.released || tub.needsRecount || tub.grade === 'unknown')) return false;
  if (act === 'issue' && !tub.released && !mayRelease(role)) return false;
  return mayRecord(role, RECORDS[act]);
}
