import { sql } from 'kysely';
import { v7 as uuidv7 } from 'uuid';
import { PROTOCOL, type PushResponse } from '#contract/push.ts';
import { pullResponse } from '#contract/pull.ts';
import { readShelf } from '#offline/shown.ts';
import { inShop } from '#server/db/in-shop.ts';
import type { Simulated } from './simulate.ts';
import type { SimulatedShop } from './simulated-shop.ts';

/** What must hold once it is quiet; each broken one is a sentence that begins with its name. */
export async function brokenInvariants(shop: SimulatedShop, simulated: Simulated): Promise<string[]> {
  return [
    ...(await onceEach(shop, simulated)),
    ...(await balances(shop, simulated)),
    ...(await onlyDuplicates(simulated)),
    ...(await sameAsFresh(simulated)),
    ...(await trayOfServer(shop, simulated)),
  ];
}

/** (1) Every operation shown as saved is exactly once in the server's log, its quarantine or the outbox, and nothing else is. */
async function onceEach({ db, shopId }: SimulatedShop, { saved, stations }: Simulated): Promise<string[]> {
  const installs = stations.map(({ open }) => open.installId);
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
  for (const { open } of stations)
    for (const { opId, status } of await open.outbox.ops.toArray()) if (status === 'waiting') waiting.add(opId);
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
  for (const { open } of stations) {
    for (const tub of await readShelf(open))
      if (tub.balanceMg !== known.get(tub.id))
        broken.push(`balance: a station shows ${tub.balanceMg} mg of ${tub.id}, the server has ${known.get(tub.id)}`);
  }
  return broken;
}

/** (4) A second push gives only what the first one gave. */
async function onlyDuplicates({ stations }: Simulated): Promise<string[]> {
  const broken: string[] = [];
  for (const { open, handlers } of stations) {
    const entries = (await open.outbox.ops.toArray()).filter(({ status }) => status === 'sent');
    for (let at = 0; at < entries.length; at += 50) {
      const ops = entries.slice(at, at + 50).map(({ operation }) => operation);
      const body = JSON.stringify({ protocol: PROTOCOL, requestId: uuidv7(), ops });
      const answer = (await (await handlers('/api/sync/push', { method: 'POST', body })).json()) as PushResponse;
      for (const { opId, outcome } of answer.results)
        if (outcome !== 'duplicate') broken.push(`repush: ${opId} was ${outcome} the second time`);
    }
  }
  return broken;
}

/** (5) What came in pieces equals what comes at once. */
async function sameAsFresh({ stations }: Simulated): Promise<string[]> {
  const broken: string[] = [];
  const fresh = new Map<string, string>();
  let [cursor, more] = ['', true];
  const [first] = stations;
  while (more && first !== undefined) {
    const response = await first.handlers(`/api/sync/pull?${new URLSearchParams({ cursor })}`);
    const page = pullResponse.parse(await response.json());
    for (const change of page.changes)
      if ('row' in change && change.table === 'buckets') fresh.set(change.id, JSON.stringify(change.row));
    [cursor, more] = [page.cursor, page.more];
  }
  for (const { open } of stations) {
    const held = new Map((await open.cache.rows('buckets').toArray()).map((row) => [row.id, row]));
    for (const [id, row] of fresh) {
      const mine = held.get(id);
      const theirs = JSON.parse(row) as { balanceMg: number; state: string; locationId: string | null };
      if (mine?.balanceMg !== theirs.balanceMg || mine.state !== theirs.state || mine.locationId !== theirs.locationId)
        broken.push(`fold: tub ${id} is another one on a station than in a fresh load`);
    }
  }
  return broken;
}

/** (6) What waits for a decision on the stations is what the server refused. */
async function trayOfServer({ db, shopId }: SimulatedShop, { stations }: Simulated): Promise<string[]> {
  const broken: string[] = [];
  for (const { open, stationId } of stations) {
    const tray = await open.outbox.ops.where('status').equals('rejected').count();
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
