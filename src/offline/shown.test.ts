import { v7 as uuidv7 } from 'uuid';
import { expect, test } from 'vitest';
import { batchMixed, fresh, relocated, returned } from '#tests/support/operations.ts';
import { formulaRow, tubRow } from '#tests/support/rows.ts';
import { makeStation, START } from '#tests/support/station.ts';
import { recordOperation } from './record-operation.ts';
import { readBatches, readBucketByCode, readFormula, readFormulas, readQueue, readShelf } from './shown.ts';
import type { Station } from './station.ts';

async function stationAt(seq: number, ...tubs: ReturnType<typeof tubRow>[]): Promise<Station> {
  const station = await makeStation();
  await station.cache.rows('buckets').bulkPut(tubs);
  await station.cache.meta.put({ name: 'position', cursor: 'c', seq, completeAt: START.toISOString() });
  return station;
}

const balanceOf = async (station: Station) => (await readShelf(station))[0]?.balanceMg;

test('what waits is shown folded in, and the cache stays as it was pulled', async () => {
  const tub = tubRow({ balanceMg: 500_000 });
  const station = await stationAt(3, tub);
  await recordOperation(station, returned(tub.id));
  expect(await balanceOf(station)).toBe(300_000);
  expect(await station.cache.rows('buckets').get(tub.id)).toEqual(tub);
});

test('what was sent is folded until the rows that hold it are here, and never twice', async () => {
  const tub = tubRow({ balanceMg: 500_000 });
  const station = await stationAt(3, tub);
  const { opId } = await recordOperation(station, returned(tub.id));
  await station.outbox.ops.update(opId, { status: 'sent', changeSeq: 4 });
  expect(await balanceOf(station)).toBe(300_000);
  await station.cache.rows('buckets').put({ ...tub, balanceMg: 300_000 });
  await station.cache.meta.update('position', { seq: 4 });
  expect(await balanceOf(station)).toBe(300_000);
});

test.each(['rejected', 'dropped'] as const)('what was %s is not shown as done', async (status) => {
  const tub = tubRow({ balanceMg: 500_000 });
  const station = await stationAt(3, tub);
  const { opId } = await recordOperation(station, returned(tub.id));
  await station.outbox.ops.update(opId, { status });
  expect(await balanceOf(station)).toBe(500_000);
});

test('a batch mixed here is on the shelf and among the batches at once', async () => {
  const station = await stationAt(3);
  const mixed = batchMixed([fresh(uuidv7(), 850_000)]);
  await recordOperation(station, mixed);
  expect((await readBucketByCode(station, 'AC23467A'))?.balanceMg).toBe(850_000);
  expect((await readBatches(station)).map(({ id }) => id)).toEqual([mixed.body.batchId]);
  expect(await readBucketByCode(station, 'AC00000A')).toBeUndefined();
});

test('formulas are read by id', async () => {
  const station = await stationAt(3);
  const [blue, red] = [formulaRow({ name: 'Blue' }), formulaRow({ name: 'Red' })];
  await station.cache.rows('formulas').bulkPut([blue, red]);
  expect(await readFormula(station, red.id)).toEqual(red);
  expect(await readFormula(station, uuidv7())).toBeUndefined();
  expect(await readFormulas(station)).toHaveLength(2);
});

test('the queue is what waits, what was refused and what was sent today, each in the order of recording', async () => {
  const station = await stationAt(3);
  const ids: string[] = [];
  for (let n = 0; n < 6; n++) ids.push((await recordOperation(station, relocated(uuidv7()))).opId);
  const [first, refused, dropped, yesterday, today, last] = ids as [string, string, string, string, string, string];
  const noon = new Date(2026, 10, 30, 12);
  const { ops } = station.outbox;
  await ops.update(refused, { status: 'rejected' });
  await ops.update(dropped, { status: 'dropped' });
  await ops.update(yesterday, { status: 'sent', changeSeq: 1, sentAt: new Date(2026, 10, 29, 23).toISOString() });
  await ops.update(today, { status: 'sent', changeSeq: 2, sentAt: new Date(2026, 10, 30, 1).toISOString() });
  const queue = await readQueue(station, noon);
  const idsOf = (entries: readonly { opId: string }[]) => entries.map(({ opId }) => opId);
  expect(idsOf(queue.waiting)).toEqual([first, last]);
  expect(idsOf(queue.rejected)).toEqual([refused]);
  expect(idsOf(queue.sentToday)).toEqual([today]);
});
