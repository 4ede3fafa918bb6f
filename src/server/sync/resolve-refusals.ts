import { type RawBuilder, type SqlBool, sql } from 'kysely';
import { type Operation, corrected } from '#contract/operation.ts';
import type { ShopTransaction } from '#server/db/in-shop.ts';
import type { PushDeps, PushStation, Received, Refused } from './apply-push.ts';
import { settledBy } from './refused-entries.ts';

/**
 * An accepted entry settles the refusals of what it corrects or drops, and a drop is audited. One that is refused in its
 * turn takes the place of its own station's refusal, so that a manager sees what the station's tray shows.
 */
export async function resolveRefusals(
  trx: ShopTransaction,
  station: PushStation,
  accepted: readonly Operation[],
  refused: readonly Refused[],
  deps: PushDeps,
): Promise<void> {
  for (const operation of accepted)
    await resolve(trx, station.shopId, { opId: settledBy(operation), by: operation.opId }, sql<SqlBool>`true`);
  const unsettled = sql<SqlBool>`station_id = ${station.stationId} and resolved_by is null`;
  for (const { entry } of refused)
    await resolve(trx, station.shopId, { opId: meantToSettle(entry), by: entry.opId }, unsettled);
  const drops = accepted.flatMap((operation) => (operation.type === 'entry-dropped' ? operation : []));
  if (drops.length === 0) return;
  const rows = drops.map(({ opId, actorId, body }) => ({
    shopId: station.shopId,
    id: deps.randomId(),
    at: deps.now(),
    actorId,
    kind: 'entry-dropped',
    detail: JSON.stringify({ opId: body.opId, by: opId, reason: body.reason, station: station.stationId }),
  }));
  await trx.insertInto('audit').values(rows).execute();
}

function meantToSettle({ parsed, raw }: Received): string | undefined {
  return 'operation' in parsed ? settledBy(parsed.operation) : corrected.safeParse(raw).data?.supersedes;
}

async function resolve(
  trx: ShopTransaction,
  shopId: string,
  { opId, by }: { opId: string | undefined; by: string },
  which: RawBuilder<SqlBool>,
): Promise<void> {
  if (opId === undefined || opId === by) return;
  await sql`
    update quarantine set resolved_by = ${by} where shop_id = ${shopId} and op_id = ${opId} and ${which}`.execute(trx);
}
