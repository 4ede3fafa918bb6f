import { sql } from 'kysely';
import type { Operation } from '#contract/operation.ts';
import { readShelf } from '#offline/shown.ts';
import { inShop } from '#server/db/in-shop.ts';
import type { SimulatedShop } from './simulated-shop.ts';
import type { SimulatedStation } from './simulated-station.ts';

/**
 * At any moment a station shows of each tub: the movements up to its cursor, and each of its own entries that is not
 * among them, once.
 */
export async function brokenInShown(
  shop: SimulatedShop,
  station: SimulatedStation,
  saved: ReadonlyMap<string, SimulatedStation>,
): Promise<string[]> {
  const { open } = station.requireTab();
  const seq = (await open.cache.meta.get('position'))?.seq ?? 0;
  const [sums, logged] = await movementsUpTo(shop, seq);
  for (const { opId, operation, status } of await open.outbox.ops.toArray()) {
    if (status === 'rejected' || logged.has(opId) || !saved.has(opId)) continue;
    for (const [id, delta] of changesOf(operation)) sums.set(id, (sums.get(id) ?? 0) + delta);
  }
  return (await readShelf(open)).flatMap(({ id, balanceMg }) =>
    balanceMg === (sums.get(id) ?? 0)
      ? []
      : [`shown: station ${station.name} shows ${balanceMg} mg of tub ${id}, and it is ${sums.get(id) ?? 0}`],
  );
}

async function movementsUpTo({ db, shopId }: SimulatedShop, seq: number) {
  return inShop(db, shopId, async (trx) => {
    const sums = await sql<{ id: string; sum: number }>`
      select m.bucket_id as id, sum(m.delta_mg)::bigint as sum
      from movements m join operations o on o.shop_id = m.shop_id and o.op_id = m.op_id
      where m.shop_id = ${shopId} and o.change_seq <= ${seq} group by m.bucket_id`.execute(trx);
    const logged = await trx
      .selectFrom('operations')
      .select('opId')
      .where('shopId', '=', shopId)
      .where('changeSeq', '<=', seq)
      .execute();
    return [new Map(sums.rows.map(({ id, sum }) => [id, sum])), new Set(logged.map(({ opId }) => opId))] as const;
  });
}

/** What an entry of the simulation moves, mg by tub; written here a second time, apart from the overlay. */
function changesOf({ type, body }: Operation): [string, number][] {
  if (type === 'bucket-recounted' || type === 'bucket-returned') return [[body.bucketId, body.deltaMg]];
  if (type !== 'batch-mixed') return [];
  const taken = body.additions.flatMap((addition): [string, number][] =>
    addition.kind === 'bucket' ? [[addition.bucketId, -addition.actualMg]] : [],
  );
  return [...taken, ...body.filled.map(({ bucketId, massMg }): [string, number] => [bucketId, massMg])];
}
