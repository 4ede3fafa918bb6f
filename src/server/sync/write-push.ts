import { type SqlBool, sql } from 'kysely';
import type { ShopTransaction } from '#server/db/in-shop.ts';
import { queueJobs } from '#server/jobs/queue-jobs.ts';
import { insertRows } from './insert-rows.ts';
import type { PushBook, PushWrites } from './push-book.ts';
import type { BucketRow } from './push-facts.ts';

/** Writes all that a push's operations did, in the order that foreign keys ask for, one statement a table. */
export async function writePush(trx: ShopTransaction, shopId: string, seq: number, book: PushBook): Promise<void> {
  const { writes } = book;
  await insertRows(trx, 'operations', writes.operations);
  await countInstalls(trx, shopId, writes);
  await proposeRevisions(trx, shopId, seq, writes);
  await insertRows(trx, 'batches', writes.batches);
  await releaseBatches(trx, shopId, seq, writes);
  const tubs = [...book.tubs.values()];
  await insertRows(trx, 'buckets', tubs.filter(({ id }) => book.newTubs.has(id)).map(asInserted));
  await changeTubs(
    trx,
    shopId,
    tubs.filter(({ id }) => !book.newTubs.has(id)),
  );
  await insertRows(trx, 'additions', writes.additions);
  await insertRows(trx, 'bucketComposition', writes.bucketComposition);
  await insertRows(trx, 'bucketParents', writes.bucketParents);
  await insertRows(trx, 'movements', writes.movements);
  await insertRows(trx, 'lotMovements', writes.lotMovements);
  await drawFromLots(trx, shopId, seq, writes);
  await queueJobs(trx, writes.jobs);
}

/** A JSON column takes text: the driver would send an array as a PostgreSQL array. */
function asInserted({ lab, seen, trace, ...row }: BucketRow) {
  const json = { seen: JSON.stringify(seen), trace: JSON.stringify(trace) };
  return { ...row, ...json, lab: lab === null ? null : JSON.stringify(lab) };
}

/** The last number of each install that has arrived: gaps are found by it, nothing is gated. */
async function countInstalls(trx: ShopTransaction, shopId: string, { operations }: PushWrites): Promise<void> {
  const last = new Map<string, number>();
  for (const { installId, deviceSeq } of operations) last.set(installId, Math.max(last.get(installId) ?? 0, deviceSeq));
  for (const [id, deviceSeq] of last) {
    await trx
      .updateTable('installs')
      .set((eb) => ({ lastSeq: eb.fn<number>('greatest', ['lastSeq', eb.val(deviceSeq)]) }))
      .where('shopId', '=', shopId)
      .where('id', '=', id)
      .execute();
  }
}

/** Stations hold a formula with all its revisions, so the formula changes with them. */
async function proposeRevisions(trx: ShopTransaction, shopId: string, seq: number, writes: PushWrites): Promise<void> {
  if (writes.formulaRevisions.length === 0) return;
  await insertRows(trx, 'formulaRevisions', writes.formulaRevisions);
  await insertRows(trx, 'formulaParts', writes.formulaParts);
  const changed = writes.formulaRevisions.map(({ formulaId }) => formulaId);
  await trx
    .updateTable('formulas')
    .set({ changeSeq: seq })
    .where('shopId', '=', shopId)
    .where('id', 'in', changed)
    .execute();
}

/** Of several releases of one batch the same one stays, whichever came first. */
async function releaseBatches(trx: ShopTransaction, shopId: string, seq: number, writes: PushWrites): Promise<void> {
  for (const { batchId, light, releasedBy } of writes.releases) {
    await trx
      .updateTable('batches')
      .set({ state: 'released', light, releasedBy, changeSeq: seq })
      .where('shopId', '=', shopId)
      .where('id', '=', batchId)
      .where(
        sql<SqlBool>`(state = 'mixed' or (released_by::text collate "C", light collate "C") < (${releasedBy}, ${light}))`,
      )
      .execute();
  }
}

async function changeTubs(trx: ShopTransaction, shopId: string, tubs: readonly BucketRow[]): Promise<void> {
  if (tubs.length === 0) return;
  const changed = tubs.map((tub) => ({
    id: tub.id,
    tare_mg: tub.tareMg,
    balance_mg: tub.balanceMg,
    location_id: tub.locationId,
    state: tub.state,
    grade: tub.grade,
    released: tub.released,
    needs_recount: tub.needsRecount,
    seen: tub.seen,
    trace: tub.trace,
    generation: tub.generation,
    job_id: tub.jobId,
    change_seq: tub.changeSeq,
  }));
  await sql`
    update buckets b set tare_mg = x.tare_mg, balance_mg = x.balance_mg, location_id = x.location_id, state = x.state,
      grade = x.grade, released = x.released, needs_recount = x.needs_recount, seen = x.seen, trace = x.trace,
      generation = x.generation, job_id = x.job_id, change_seq = x.change_seq
    from jsonb_to_recordset(${JSON.stringify(changed)}::jsonb) as x(id uuid, tare_mg bigint, balance_mg bigint,
      location_id uuid, state text, grade text, released boolean, needs_recount boolean, seen jsonb, trace jsonb, generation int,
      job_id uuid, change_seq bigint)
    where b.shop_id = ${shopId} and b.id = x.id`.execute(trx);
}

async function drawFromLots(
  trx: ShopTransaction,
  shopId: string,
  seq: number,
  { lotMovements }: PushWrites,
): Promise<void> {
  const drawn = new Map<string, number>();
  for (const { lotId, deltaMg } of lotMovements) drawn.set(lotId, (drawn.get(lotId) ?? 0) + deltaMg);
  if (drawn.size === 0) return;
  const changed = [...drawn].map(([id, delta]) => ({ id, delta }));
  await sql`
    update lots l set balance_mg = l.balance_mg + x.delta, change_seq = ${seq}
    from jsonb_to_recordset(${JSON.stringify(changed)}::jsonb) as x(id uuid, delta bigint)
    where l.shop_id = ${shopId} and l.id = x.id`.execute(trx);
}
