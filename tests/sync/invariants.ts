import { isDeepStrictEqual } from 'node:util';
import { sql } from 'kysely';
import { v7 as uuidv7 } from 'uuid';
import { PROTOCOL, type PushResponse } from '#contract/push.ts';
import { pullResponse } from '#contract/pull.ts';
import { type TableName, rows, tableNames } from '#contract/rows.ts';
import { readShelf } from '#offline/shown.ts';
import { seededRandom } from '#scripts/seed/random.ts';
import { inShop } from '#server/db/in-shop.ts';
import type { Simulated } from './simulate.ts';
import type { SimulatedShop } from './simulated-shop.ts';
import type { SimulatedStation } from './simulated-station.ts';

/** What must hold once it is quiet; each broken one is a sentence that begins with its name. */
export async function brokenInvariants(simulated: Simulated): Promise<string[]> {
  const { shop } = simulated;
  return [
    ...simulated.broken,
    ...(await onceEach(shop, simulated)),
    ...(await balances(shop, simulated)),
    ...(await onlyDuplicates(simulated)),
    ...(await sameAsFresh(simulated)),
    ...(await trayOfServer(shop, simulated)),
  ];
}

/** (1) Every operation shown as saved is exactly once in the server's log, its quarantine or the outbox, and nothing else is. */
async function onceEach({ db, shopId }: SimulatedShop, { saved, stations }: Simulated): Promise<string[]> {
  const installs = stations.map(({ given }) => given.enrolled.installId);
  const { logged, kept } = await inShop(db, shopId, async (trx) => ({
    logged: await trx
      .selectFrom('operations')
      .select('opId')
      .where('shopId', '=', shopId)
      .where('installId', 'in', installs)
      .execute(),
    kept: await trx
      .selectFrom('quarantine')
      .select('opId')
      .where('shopId', '=', shopId)
      .where('opId', 'in', [...saved.keys()])
      .execute(),
  }));
  const waiting = new Set<string>();
  for (const station of stations)
    for (const { opId, status } of await station.requireTab().open.outbox.ops.toArray())
      if (status === 'waiting') waiting.add(opId);
  const [inLog, inQuarantine] = [new Set(logged.map(({ opId }) => opId)), new Set(kept.map(({ opId }) => opId))];
  const broken = [...saved.keys()].flatMap((opId) => {
    const places = [inLog, inQuarantine, waiting].filter((place) => place.has(opId)).length;
    return places === 1 ? [] : [`once: operation ${opId} is in ${places} places`];
  });
  const doubled = [...inLog].filter((opId) => !saved.has(opId));
  return [...broken, ...doubled.map((opId) => `once: ${opId} is in the log and nobody saved it`)];
}

/** (3) Balance = sum of movements on the server, and every station shows it. */
async function balances({ db, shopId }: SimulatedShop, { stations }: Simulated): Promise<string[]> {
  const rows = await inShop(db, shopId, (trx) =>
    sql<{ id: string; balance: number; sum: number }>`
      select b.id, b.balance_mg as balance, coalesce(sum(m.delta_mg), 0)::bigint as sum
      from buckets b left join movements m on m.shop_id = b.shop_id and m.bucket_id = b.id
      where b.shop_id = ${shopId} group by b.id, b.balance_mg`.execute(trx),
  );
  const broken = rows.rows
    .filter(({ balance, sum }) => balance !== sum)
    .map(({ id }) => `balance: tub ${id} is not the sum of its movements`);
  const known = new Map(rows.rows.map(({ id, balance }) => [id, balance]));
  for (const station of stations) {
    for (const tub of await readShelf(station.requireTab().open))
      if (tub.balanceMg !== known.get(tub.id))
        broken.push(`balance: a station shows ${tub.balanceMg} mg of ${tub.id}, the server has ${known.get(tub.id)}`);
  }
  return broken;
}

/** (4) A second push gives only what the first one gave. */
async function onlyDuplicates({ stations }: Simulated): Promise<string[]> {
  const broken: string[] = [];
  for (const station of stations) {
    const entries = (await station.requireTab().open.outbox.ops.toArray()).filter(({ status }) => status === 'sent');
    for (let at = 0; at < entries.length; at += 50) {
      const ops = entries.slice(at, at + 50).map(({ operation }) => operation);
      const body = JSON.stringify({ protocol: PROTOCOL, requestId: uuidv7(), ops });
      const answer = (await (await ask(station, '/api/sync/push', { method: 'POST', body })).json()) as PushResponse;
      for (const { opId, outcome } of answer.results)
        if (outcome !== 'duplicate') broken.push(`repush: ${opId} was ${outcome} the second time`);
    }
  }
  return broken;
}

/** (5) What came in pieces equals what comes at once, row by row and field by field. */
async function sameAsFresh({ stations }: Simulated): Promise<string[]> {
  const broken: string[] = [];
  for (const station of stations) {
    const fresh = await loadFresh(station);
    const { cache } = station.requireTab().open;
    for (const name of tableNames) {
      const held = new Map((await cache.rows(name).toArray()).map((row) => [row.id, row]));
      const theirs = fresh.get(name) ?? new Map<string, unknown>();
      for (const id of new Set([...held.keys(), ...theirs.keys()]))
        if (!isDeepStrictEqual(held.get(id), theirs.get(id)))
          broken.push(`fold: ${name} ${id} is another one on station ${station.name} than in a fresh load`);
    }
  }
  return broken;
}

async function loadFresh(station: SimulatedStation): Promise<Map<TableName, Map<string, unknown>>> {
  const fresh = new Map<TableName, Map<string, unknown>>();
  let [cursor, more] = ['', true];
  while (more) {
    const response = await ask(station, `/api/sync/pull?${new URLSearchParams({ cursor })}`);
    const page = pullResponse.parse(await response.json());
    for (const change of page.changes as { table: TableName; id: string; row?: unknown }[]) {
      const rowsOfTable = fresh.get(change.table) ?? new Map<string, unknown>();
      fresh.set(change.table, rowsOfTable);
      if (change.row !== undefined) rowsOfTable.set(change.id, rows[change.table].parse(change.row));
    }
    [cursor, more] = [page.cursor, page.more];
  }
  return fresh;
}

/** The station's own way to the server, without a network between. */
function ask({ given }: SimulatedStation, input: string, init?: RequestInit): Promise<Response> {
  return given.server({ input, init, doomed: false, random: seededRandom(1), order: 'asked' });
}

/** (6) What waits for a decision on the stations is what the server refused. */
async function trayOfServer({ db, shopId }: SimulatedShop, { stations }: Simulated): Promise<string[]> {
  const broken: string[] = [];
  for (const station of stations) {
    const { stationId } = station.given.enrolled;
    const tray = await station.requireTab().open.outbox.ops.where('status').equals('rejected').count();
    const { n } = await inShop(db, shopId, (trx) =>
      trx
        .selectFrom('quarantine')
        .select((eb) => eb.fn.countAll<number>().as('n'))
        .where('shopId', '=', shopId)
        .where('stationId', '=', stationId)
        .where('resolvedBy', 'is', null)
        .executeTakeFirstOrThrow(),
    );
    if (tray !== Number(n)) broken.push(`tray: a station shows ${tray} refusals, the server holds ${n}`);
  }
  return broken;
}
