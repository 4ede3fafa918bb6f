import { v7 as uuidv7 } from 'uuid';
import { expect, test } from 'vitest';
import { relocated } from '#tests/support/operations.ts';
import { makeStation, START } from '#tests/support/station.ts';
import { forgetSent } from './forget-sent.ts';
import { recordOperation } from './record-operation.ts';

test('forgets after fourteen days what was sent and is in the cache, and nothing else', async () => {
  const station = await makeStation();
  await station.cache.meta.put({ name: 'position', cursor: 'c', seq: 10, completeAt: null });
  const day = (n: number) => new Date(START.getTime() + n * 86_400_000);
  const sentAt = START.toISOString();
  const states = [
    { status: 'sent' as const, changeSeq: 10, sentAt },
    { status: 'sent' as const, changeSeq: 10, sentAt: day(2).toISOString() },
    { status: 'sent' as const, changeSeq: 11, sentAt },
    { status: 'waiting' as const, changeSeq: null, sentAt: null },
    { status: 'rejected' as const, changeSeq: null, sentAt: null },
  ];
  for (const state of states) {
    const { opId } = await recordOperation(station, relocated(uuidv7()));
    await station.outbox.ops.update(opId, state);
  }
  const left = async () => (await station.outbox.ops.orderBy('deviceSeq').toArray()).map(({ deviceSeq }) => deviceSeq);
  await forgetSent(station, day(14));
  expect(await left()).toEqual([1, 2, 3, 4, 5]);
  await forgetSent(station, day(14.5));
  expect(await left()).toEqual([2, 3, 4, 5]);
});
