import { expect, test } from 'vitest';
import { summariseShift } from '#domain/shift-summary.ts';
import type { OperationBody } from '#contract/operation-bodies.ts';
import { batchMixed, fresh, fromTub } from '#tests/support/operations.ts';
import { tubRow } from '#tests/support/rows.ts';
import { makeStation, START } from '#tests/support/station.ts';
import { recordOperation } from './record-operation.ts';
import { readShift } from './shift-facts.ts';
import { putKey } from './outbox-keys.ts';
import type { Station } from './station.ts';

const MINUTE = 60_000;
let made = 0;
const deps = { now: () => START, randomId: () => `00000000-0000-7000-8000-${String(++made).padStart(12, '0')}` };

async function stationWith(...tubs: ReturnType<typeof tubRow>[]): Promise<Station> {
  const station = await makeStation();
  await station.cache.rows('buckets').bulkPut(tubs);
  await putKey(station.outbox, 'clock', { offsetMs: 90 * MINUTE, uncertaintyMs: 10, lastContact: START.toISOString() });
  await station.cache.meta.put({ name: 'position', cursor: '', seq: 0, completeAt: START.toISOString() });
  return station;
}

const discarded = (bucketId: string, displayedMg: number): OperationBody => ({
  type: 'bucket-discarded',
  body: { bucketId, displayedMg, reason: 'Dried or gelled', note: null },
});

test('what waits on this device is in the summary, at the time of the clock of its last contact', async () => {
  const [leftover, gone] = [tubRow({ balanceMg: 300_000 }), tubRow({ balanceMg: 120_000 })];
  const station = await stationWith(leftover, gone, tubRow({ state: 'at-press' }));
  const additions = [fromTub(leftover.id, 200_000), fresh(leftover.id, 650_000)];
  await recordOperation(station, batchMixed(additions), deps);
  await recordOperation(station, discarded(gone.id, gone.balanceMg), deps);

  const { facts, now } = await readShift(station, START);
  expect(now.getTime()).toBe(START.getTime() + 90 * MINUTE);
  const ofMinute = summariseShift({ fromMs: now.getTime(), toMs: now.getTime() + MINUTE }, facts);
  expect(ofMinute).toMatchObject({
    batches: 1,
    mixedMg: 850_000,
    reusedMg: 200_000,
    discards: 1,
    discardedMg: 120_000,
    open: { waiting: 2, refused: 0 },
  });
  expect(ofMinute.open.atPress).toHaveLength(1);
  expect(ofMinute.open.unreleased).toHaveLength(1);
});

test('a refused discard is no discard but something to decide', async () => {
  const tub = tubRow();
  const station = await stationWith(tub);
  const { opId } = await recordOperation(station, discarded(tub.id, tub.balanceMg), deps);
  await station.outbox.ops.update(opId, { status: 'rejected' });
  const { facts } = await readShift(station, START);
  expect(facts).toMatchObject({ discards: [], waiting: 0, refused: 1 });
});

test('a summary that waits is kept as one, and is no open point of the next', async () => {
  const station = await stationWith();
  const [from, to] = [START, new Date(START.getTime() + MINUTE)].map((at) => at.toISOString()) as [string, string];
  const openPoints = { waiting: 0, refused: 0, recounts: 0, unreleased: 0, atPress: 0 };
  const figures = { batches: 0, mixedMg: 0, reusedMg: 0, discards: 0, discardedMg: 0 };
  await recordOperation(
    station,
    { type: 'shift-reported', body: { from, to, ...figures, openPoints, note: null } },
    deps,
  );
  const { facts, reports } = await readShift(station, START);
  expect([facts.waiting, reports.length]).toEqual([0, 1]);
});
