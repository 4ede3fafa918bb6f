import { type ApplyContext, RejectedError } from '#server/sync/apply-context.ts';

const NAMES = {
  jobs: 'job',
  locations: 'place',
  containers: 'container',
  scales: 'scale',
  lots: 'lot',
  components: 'component',
  families: 'family',
  people: 'person',
} as const;

/** Each id must be of this shop; null is none. @throws RejectedError */
export async function requireOwn(
  { trx, shopId }: ApplyContext,
  table: keyof typeof NAMES,
  ...ids: readonly (string | null)[]
): Promise<void> {
  const wanted = [...new Set(ids.filter((id) => id !== null))];
  if (wanted.length === 0) return;
  const rows = await trx
    .selectFrom(table)
    .select('id')
    .where('shopId', '=', shopId)
    .where('id', 'in', wanted)
    .execute();
  if (rows.length < wanted.length)
    throw new RejectedError(`no-such-${NAMES[table]}`, `There is no such ${NAMES[table]} in this shop.`);
}
