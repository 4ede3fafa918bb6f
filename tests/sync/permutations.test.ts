import { afterAll, expect, test } from 'vitest';
import { sql } from 'kysely';
import { v7 as uuidv7 } from 'uuid';
import { type Random, seededRandom } from '#scripts/seed/random.ts';
import { type Database, openDatabase } from '#server/db/connection.ts';
import { inShop } from '#server/db/in-shop.ts';
import { applyPush } from '#server/sync/apply-push.ts';
import { makeFreshDatabase } from '#tests/support/fresh-database.ts';
import { RECEIVED, type Recorded, recordPushes } from './recorded-pushes.ts';
import { type SimulatedShop, makeSimulatedShop } from './simulated-shop.ts';

const STATIONS = 5;
const open: (() => Promise<void>)[] = [];
afterAll(async () => {
  for (const close of open) await close();
});

/** The same shop, ids and all, in a database of its own. */
async function sameShop(seed: number): Promise<SimulatedShop> {
  const fresh = await makeFreshDatabase();
  const db: Database = openDatabase(fresh.appUrl, 2);
  open.push(async () => {
    await db.destroy();
    await fresh.drop();
  });
  return makeSimulatedShop(db, seed, STATIONS);
}

/** What became of each entry; what is to be retried is sent again by itself, until it is decided. */
async function send(shop: SimulatedShop, pushes: readonly Recorded[]): Promise<Map<string, string>> {
  const outcomes = new Map<string, string>();
  let waiting = pushes;
  for (let round = 0; waiting.length > 0 && round < 20; round++) {
    const again: Recorded[] = [];
    for (const { stationId, push } of waiting) {
      const deps = { now: () => RECEIVED, randomId: uuidv7 };
      const { results } = await applyPush(shop.db, { shopId: shop.shopId, stationId }, push, deps);
      for (const result of results) {
        if (result.outcome !== 'duplicate')
          outcomes.set(result.opId, result.outcome === 'rejected' ? result.problem.code : result.outcome);
        const op = push.ops.find((sent) => (sent as { opId: string }).opId === result.opId);
        if (result.outcome === 'retry') again.push({ stationId, push: { ...push, ops: [op] } });
      }
    }
    waiting = again;
  }
  return outcomes;
}

/** Everything that stations see of tubs and batches, but for its place in the order of changes. */
async function standOf({ db, shopId }: SimulatedShop) {
  return inShop(db, shopId, async (trx) => {
    const tubs = await trx.selectFrom('buckets').selectAll().where('shopId', '=', shopId).orderBy('id').execute();
    const batches = await trx.selectFrom('batches').selectAll().where('shopId', '=', shopId).orderBy('id').execute();
    const shares = await sql`select bucket_id, component_id, ppb from bucket_composition order by 1, 2`.execute(trx);
    const moved = await sql<{ id: string; sum: number }>`
      select bucket_id as id, sum(delta_mg)::bigint as sum from movements group by 1 order by 1`.execute(trx);
    return {
      tubs: tubs.map((tub) => ({ ...tub, changeSeq: null })),
      batches: batches.map((batch) => ({ ...batch, changeSeq: null })),
      shares: shares.rows,
      sums: moved.rows,
    };
  });
}

function shuffle(pushes: readonly Recorded[], random: Random): Recorded[] {
  const drawn = pushes.map((push) => ({ push, at: random.next() }));
  return drawn.sort((a, b) => a.at - b.at).map(({ push }) => push);
}

test.each([1, 2, 3])(
  'outcomes, flags, balances and states of two hot tubs are the same under ten permutations of what five stations send (%i)',
  async (seed) => {
    const pushes = await recordPushes(await sameShop(seed), seed, 90);
    expect(pushes.length).toBeGreaterThan(15);
    const first = await sameShop(seed);
    const outcomes = await send(first, pushes);
    const stand = await standOf(first);
    expect(new Set(outcomes.values())).toEqual(new Set(['accepted', 'no-such-place']));
    expect(stand.sums.map(({ sum }) => Number(sum))).toEqual(stand.tubs.map(({ balanceMg }) => balanceMg));
    for (let permutation = 0; permutation < 10; permutation++) {
      const random = seededRandom(seed * 100 + permutation);
      const shop = await sameShop(seed);
      const again = await send(shop, shuffle(pushes, random));
      expect(Object.fromEntries(again)).toEqual(Object.fromEntries(outcomes));
      expect(await standOf(shop)).toEqual(stand);
    }
  },
);
