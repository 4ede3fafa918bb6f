import { type ApplyContext, RejectedError } from './apply-context.ts';
import type { OwnedTable } from './push-facts.ts';

const NAMES: Record<OwnedTable, string> = {
  jobs: 'job',
  locations: 'place',
  containers: 'container',
  scales: 'scale',
  lots: 'lot',
  components: 'component',
  families: 'family',
  people: 'person',
};

/** Each id must be of this shop; null is none. @throws RejectedError */
export function requireOwn({ draft }: ApplyContext, table: OwnedTable, ...ids: readonly (string | null)[]): void {
  const owned = draft.facts.owned.get(table);
  if (ids.some((id) => id !== null && owned?.has(id) !== true))
    throw new RejectedError(`no-such-${NAMES[table]}`, `There is no such ${NAMES[table]} in this shop.`);
}
