import { sql } from 'kysely';
import type { LostInstall } from '#contract/station-report.ts';
import type { ShopTransaction } from '#server/db/in-shop.ts';
import type { SignedIn } from './sessions.ts';
import type { Install, KnownStation } from './stations.ts';

/** Numbers that are listed one by one. */
const MOST_LISTED = 100;

interface Deps {
  now: () => Date;
  randomId: () => string;
}

/**
 * The station's cookie is here and an outbox that it once had is not: the browser cleared it. Each is told once, and
 * goes into the audit log.
 */
export async function findLostInstalls(
  trx: ShopTransaction,
  {
    station,
    install,
    offered,
    person,
  }: { station: KnownStation; install: Install; offered: readonly string[]; person: SignedIn },
  deps: Deps,
): Promise<LostInstall[]> {
  const { shopId, stationId } = station;
  const gone = await trx
    .updateTable('installs')
    .set({ lostAt: deps.now() })
    .where('shopId', '=', shopId)
    .where('stationId', '=', stationId)
    .where('lostAt', 'is', null)
    .where('id', 'not in', [install.id, ...offered])
    .returning(['id', 'lastSeq', 'reportedAt'])
    .execute();
  const lost: LostInstall[] = [];
  for (const { id, lastSeq, reportedAt } of gone) {
    const told = { installId: id, lastContact: reportedAt?.toISOString() ?? null };
    lost.push({ ...told, ...(await countArrived(trx, station, id, lastSeq)) });
  }
  for (const detail of lost) {
    const row = { shopId, id: deps.randomId(), at: deps.now(), actorId: person.personId, kind: 'outbox-lost' };
    const told = JSON.stringify({ station: stationId, ...detail });
    await trx
      .insertInto('audit')
      .values({ ...row, detail: told })
      .execute();
  }
  return lost;
}

/** An entry that was refused arrived as well: it lies in quarantine. */
async function countArrived(trx: ShopTransaction, { shopId, stationId }: KnownStation, id: string, lastSeq: number) {
  const { rows } = await sql<{ sentUpTo: number; missing: number[] | null; missingCount: number }>`
    with arrived as (
      select device_seq as n from operations where shop_id = ${shopId} and install_id = ${id}
      union
      select (raw ->> 'deviceSeq')::bigint from quarantine
      where shop_id = ${shopId} and station_id = ${stationId} and raw ->> 'installId' = ${id}
        and raw ->> 'deviceSeq' ~ '^[0-9]{1,15}$'
    ), missing as (
      select n from generate_series(1, ${lastSeq}::bigint) n except select n from arrived
    )
    select (select coalesce(max(n), 0) from arrived) as sent_up_to,
      (select array_agg(n order by n) from (select n from missing order by n limit ${MOST_LISTED}) listed) as missing,
      (select count(*) from missing) as missing_count`.execute(trx);
  const [found] = rows;
  return {
    sentUpTo: Number(found?.sentUpTo ?? 0),
    missing: (found?.missing ?? []).map(Number),
    missingCount: Number(found?.missingCount ?? 0),
  };
}
