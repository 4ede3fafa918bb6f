import { Dexie } from 'dexie';
import { v7 as uuidv7 } from 'uuid';
import { expect, test } from 'vitest';
import type { OperationBody } from '#contract/operation-bodies.ts';
import type { Weighing } from '#contract/weighing.ts';
import { parseBucketCode } from '#domain/bucket-code.ts';
import type { Milligrams } from '#domain/mass.ts';
import { batchMixed, fresh, fromTub, relocated, returned } from '#tests/support/operations.ts';
import { tubRow } from '#tests/support/rows.ts';
import { makeStation, START } from '#tests/support/station.ts';
import { Outbox, type QueuedOperation } from './outbox.ts';
import { RecordError } from './record-error.ts';
import { finishWeighing, recordOperation, takeBucketCode } from './record-operation.ts';
import { findWeighing, saveWeighing } from './weighings.ts';

const deps = { now: () => START, randomId: uuidv7 };

test('an entry is on the disk with who, where, when and under which grant', async () => {
  const station = await makeStation();
  const bucketId = uuidv7();
  const operation = await recordOperation(station, relocated(bucketId), deps);
  expect(operation).toMatchObject({
    installId: station.installId,
    deviceSeq: 1,
    opVersion: 1,
    actorId: station.person.id,
    grantId: station.grant.id,
    grantLapsed: false,
    deviceTime: START.toISOString(),
    clock: { offsetMs: 0, lastContact: START.toISOString() },
  });
  expect(operation.opId[14]).toBe('7');
  expect(await station.outbox.ops.toArray()).toEqual([
    {
      opId: operation.opId,
      deviceSeq: 1,
      operation,
      tubs: [bucketId],
      status: 'waiting',
      changeSeq: null,
      problem: null,
      recordedAt: START.toISOString(),
      sentAt: null,
    },
  ]);
});

test('entries recorded at once get the numbers 1 to 20, each once', async () => {
  const station = await makeStation();
  const recorded = await Promise.all(Array.from({ length: 20 }, () => recordOperation(station, relocated(uuidv7()))));
  const numbers = recorded.map((operation) => operation.deviceSeq).sort((a, b) => a - b);
  expect(numbers).toEqual(Array.from({ length: 20 }, (_, n) => n + 1));
});

test('an entry that does not fit the contract is not saved and takes no number', async () => {
  const station = await makeStation();
  const wrong = returned(uuidv7(), { grossMg: -5 as Milligrams });
  await expect(recordOperation(station, wrong)).rejects.toThrow(RecordError);
  expect(await station.outbox.ops.count()).toBe(0);
  expect((await recordOperation(station, relocated(uuidv7()))).deviceSeq).toBe(1);
});

test('an entry above 64 KiB is not saved', async () => {
  const station = await makeStation();
  const composition = Array.from({ length: 1000 }, () => ({ componentId: uuidv7(), ppb: 1_000_000 }));
  const body: OperationBody = {
    type: 'bucket-adopted',
    body: {
      bucketId: uuidv7(),
      code: 'AC23467A',
      name: 'Old blue',
      familyId: uuidv7(),
      containerId: uuidv7(),
      grossMg: 500_000 as Milligrams,
      tareMg: 68_000 as Milligrams,
      locationId: null,
      composition,
      lab: null,
    },
  };
  await expect(recordOperation(station, body)).rejects.toThrow('too large');
  expect(await station.outbox.ops.count()).toBe(0);
});

test('what a role may not record is refused before it is shown as saved', async () => {
  const station = await makeStation({ role: 'operator' });
  await expect(recordOperation(station, batchMixed([fresh(uuidv7(), 1000)]))).rejects.toThrow('operator');
  await expect(recordOperation(station, relocated(uuidv7()))).resolves.toMatchObject({ deviceSeq: 1 });
});

test('a grant that lapses while the page is open stops nobody, and the entry says so', async () => {
  const station = await makeStation();
  expect(station.grant.lapsed).toBe(false);
  const after15Hours = { ...deps, now: () => new Date(START.getTime() + 15 * 3_600_000) };
  expect((await recordOperation(station, relocated(uuidv7()), after15Hours)).grantLapsed).toBe(true);
});

test('an entry names what the station knew of the tub: the cache’s and its own', async () => {
  const station = await makeStation();
  const other = uuidv7();
  const tub = tubRow({ seen: { [other]: 12 } });
  await station.cache.rows('buckets').put(tub);
  const first = await recordOperation(station, relocated(tub.id));
  expect(first.seen).toEqual({ [tub.id]: { [other]: 12 } });
  const second = await recordOperation(station, returned(tub.id));
  expect(second.seen).toEqual({ [tub.id]: { [other]: 12, [station.installId]: first.deviceSeq } });
});

test('an entry on a tub that was filled here knows of its filling', async () => {
  const station = await makeStation();
  const mixed = batchMixed([fresh(uuidv7(), 1000)]);
  const filling = await recordOperation(station, mixed);
  const tubId = mixed.body.filled[0]?.bucketId as string;
  expect(filling.seen).toEqual({});
  expect((await recordOperation(station, relocated(tubId))).seen).toEqual({
    [tubId]: { [station.installId]: filling.deviceSeq },
  });
});

test('an entry that the server refused is not known', async () => {
  const station = await makeStation();
  const tubId = uuidv7();
  const refused = await recordOperation(station, relocated(tubId));
  await station.outbox.ops.update(refused.opId, { status: 'rejected' });
  expect((await recordOperation(station, relocated(tubId))).seen).toEqual({ [tubId]: {} });
});

test('an entry costs no more than the first, however many wait of other tubs', async () => {
  const station = await makeStation();
  const [mine, other] = [tubRow(), tubRow()];
  await station.cache.rows('buckets').bulkPut([mine, other]);
  for (let n = 0; n < 40; n++) await recordOperation(station, relocated(other.id), deps);
  let read = 0;
  station.outbox.ops.hook('reading', (queued: QueuedOperation | undefined) => {
    if (queued !== undefined) read += 1;
    return queued as QueuedOperation;
  });
  await recordOperation(station, relocated(mine.id), deps);
  await recordOperation(station, relocated(mine.id), deps);
  expect(read).toBe(1);
});

test('an outbox of before there was the index of tubs is opened with all that it holds, and known', async () => {
  const station = await makeStation();
  const tub = tubRow();
  await station.cache.rows('buckets').put(tub);
  const { deviceSeq } = await recordOperation(station, relocated(tub.id), deps);
  const [{ tubs: _, ...queued }] = (await station.outbox.ops.toArray()) as [QueuedOperation];
  await station.outbox.delete();
  const before = new Dexie(station.outbox.name);
  before.version(1).stores({ ops: '&opId, deviceSeq, status', weighings: '&id', keys: '&name' });
  await before.table('ops').add(queued);
  before.close();
  station.outbox = new Outbox(station.shop.id, station.installId);
  expect(await station.outbox.ops.toArray()).toEqual([{ ...queued, tubs: [tub.id] }]);
  const next = await recordOperation(station, relocated(tub.id), deps);
  expect(next.seen[tub.id]).toEqual({ [station.installId]: deviceSeq });
});

test('a batch names every tub that it took from', async () => {
  const station = await makeStation();
  const [a, b] = [uuidv7(), uuidv7()];
  const operation = await recordOperation(station, batchMixed([fromTub(a, 10), fresh(uuidv7(), 5), fromTub(b, 20)]));
  expect(Object.keys(operation.seen).sort()).toEqual([a, b].sort());
});

function openWeighing(): Weighing {
  return {
    id: uuidv7(),
    formulaId: uuidv7(),
    revision: 1,
    jobId: null,
    rush: false,
    scaleId: uuidv7(),
    plannedMg: 1000 as Milligrams,
    batchMg: 1000 as Milligrams,
    remaining: [],
    leftovers: {},
    additions: [],
    startedAt: START.toISOString(),
    startedBy: uuidv7(),
    updatedAt: START.toISOString(),
  };
}

test('finishing a batch queues it and closes the weighing', async () => {
  const station = await makeStation();
  const weighing = openWeighing();
  await saveWeighing(station, weighing);
  await finishWeighing(station, weighing, batchMixed([fresh(uuidv7(), 1000)]));
  expect(await findWeighing(station, weighing.id)).toBeUndefined();
  expect(await station.outbox.ops.count()).toBe(1);
});

test('a batch that cannot be recorded leaves its weighing open', async () => {
  const station = await makeStation();
  const weighing = openWeighing();
  await saveWeighing(station, weighing);
  await expect(finishWeighing(station, weighing, batchMixed([]))).rejects.toThrow(RecordError);
  expect(await findWeighing(station, weighing.id)).toEqual(weighing);
});

test('a batch finished in two tabs at once is queued once', async () => {
  const station = await makeStation();
  const weighing = openWeighing();
  await saveWeighing(station, weighing);
  const body = batchMixed([fresh(uuidv7(), 1000)]);
  const both = await Promise.allSettled([
    finishWeighing(station, weighing, body),
    finishWeighing(station, weighing, body),
  ]);
  expect(both.map(({ status }) => status).sort()).toEqual(['fulfilled', 'rejected']);
  expect(await station.outbox.ops.count()).toBe(1);
});

test('tub codes taken at once are valid, of this station, and all different', async () => {
  const station = await makeStation();
  const codes = await Promise.all(Array.from({ length: 30 }, () => takeBucketCode(station)));
  expect(new Set(codes).size).toBe(30);
  for (const code of codes) {
    expect(code.slice(0, 2)).toBe('AC');
    expect(parseBucketCode(code)).toEqual({ code });
  }
});
