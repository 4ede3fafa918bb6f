import { v7 as uuidv7 } from 'uuid';
import { afterEach, expect, test } from 'vitest';
import type { Row } from '#contract/rows.ts';
import type { Weighing } from '#contract/weighing.ts';
import type { Milligrams } from '#domain/mass.ts';
import { accepted, answering, pullAnswer, pushAnswer } from '#tests/support/fake-server.ts';
import { fillDisk } from '#tests/support/full-disk.ts';
import { batchMixed, fresh, relocated } from '#tests/support/operations.ts';
import { componentRow, formulaRow, tubRow } from '#tests/support/rows.ts';
import { makeStation, START } from '#tests/support/station.ts';
import { pullChanges } from './pull-changes.ts';
import { pushOutbox } from './push-outbox.ts';
import { finishWeighing, recordOperation, takeBucketCode } from './record-operation.ts';
import { isLoaded, readShelf } from './shown.ts';
import type { Station } from './station.ts';
import { saveWeighing } from './weighings.ts';
import { NoRoomError } from './with-room.ts';

let disk: { empty: () => void } | undefined;
afterEach(() => disk?.empty());

const DAY_MS = 86_400_000;
const deps = { now: () => START, randomId: uuidv7 };
const NEVER = () => false;

/** A loaded station with history, a shelf, two formulas, and an open batch of the first with one leftover. */
async function makeWorking() {
  const station = await makeStation();
  const [formula, otherFormula] = [formulaRow(), formulaRow()];
  const [leftover, full, empty] = [
    tubRow(),
    tubRow({ code: 'AC23468B' }),
    tubRow({ code: 'AC23469C', state: 'empty' }),
  ];
  const { cache } = station;
  await cache.rows('formulas').bulkPut([formula, otherFormula]);
  await cache.rows('components').put(componentRow());
  await cache.rows('buckets').bulkPut([leftover, full, empty]);
  await cache.rows('batches').put({ id: uuidv7() } as Row<'batches'>);
  await cache.meta.put({ name: 'position', cursor: 'cursor-9', seq: 9, completeAt: START.toISOString() });
  const weighing = weighingOf(formula.id, leftover.id);
  await saveWeighing(station, weighing);
  return { station, formula, otherFormula, leftover, full, empty, weighing };
}

function weighingOf(formulaId: string, leftoverId: string): Weighing {
  return {
    id: uuidv7(),
    formulaId,
    revision: 1,
    jobId: null,
    rush: true,
    scaleId: uuidv7(),
    plannedMg: 850_000 as Milligrams,
    batchMg: 850_000 as Milligrams,
    remaining: [{ kind: 'bucket', bucketId: leftoverId, plannedMg: 400_000 as Milligrams, empties: false }],
    leftovers: { [leftoverId]: [] },
    additions: [],
    startedAt: START.toISOString(),
    startedBy: uuidv7(),
    updatedAt: START.toISOString(),
  };
}

const fill = (station: Station, until: (store: string) => boolean, only: 'outbox' | 'both' = 'outbox') =>
  (disk = fillDisk([station.outbox.name, ...(only === 'both' ? [station.cache.name] : [])], until));

const idsOf = async (station: Station, table: 'buckets' | 'formulas') =>
  (await station.cache.rows(table).toArray()).map(({ id }) => id).sort();

test('on a full device past batches and empty tubs go first, and the entry is saved once', async () => {
  const { station, leftover, full, formula, otherFormula } = await makeWorking();
  fill(station, (store) => store === 'batches');
  const { opId } = await recordOperation(station, relocated(full.id), deps);
  expect((await station.outbox.ops.toArray()).map((entry) => entry.opId)).toEqual([opId]);
  expect(await station.cache.rows('batches').count()).toBe(0);
  expect(await idsOf(station, 'buckets')).toEqual([leftover.id, full.id].sort());
  expect(await idsOf(station, 'formulas')).toEqual([formula.id, otherFormula.id].sort());
});

test('what is freed next is all that no open weighing and no unsent entry names', async () => {
  const { station, leftover, full, formula } = await makeWorking();
  await recordOperation(station, relocated(full.id), deps);
  await station.cache.rows('buckets').put(tubRow());
  fill(station, (store) => store === 'formulas');
  await saveWeighing(station, weighingOf(formula.id, leftover.id));
  expect(await idsOf(station, 'buckets')).toEqual([leftover.id, full.id].sort());
  expect(await idsOf(station, 'formulas')).toEqual([formula.id]);
  expect(await station.cache.rows('components').count()).toBe(1);
  expect(await isLoaded(station)).toBe(true);
});

test('what was freed comes back with the next pull, which begins at the beginning', async () => {
  const { station, full, empty } = await makeWorking();
  fill(station, (store) => store === 'batches');
  await recordOperation(station, relocated(full.id), deps);
  const server = answering({
    '/api/sync/pull': () => pullAnswer({ seq: 10, changes: [{ table: 'buckets', id: empty.id, row: empty }] }),
  });
  expect(await pullChanges(station, server.deps, () => {})).toEqual({ kind: 'done' });
  expect(server.calls[0]?.query.get('cursor')).toBe('');
  expect((await readShelf(station)).map(({ id }) => id)).toContain(empty.id);
  expect(await station.cache.meta.get('position')).toMatchObject({ cursor: 'cursor-1', seq: 10 });
});

test('a pull that was under way when rows were freed does not say that they are there', async () => {
  const { station, full } = await makeWorking();
  const server = answering({ '/api/sync/pull': () => pullAnswer({ seq: 10, cursor: 'cursor-10' }) });
  const slow: typeof fetch = async (...words) => {
    fill(station, (store) => store === 'batches');
    await recordOperation(station, relocated(full.id), deps);
    return server.fetch(...words);
  };
  await pullChanges(station, { ...server.deps, fetch: slow }, () => {});
  expect((await station.cache.meta.get('position'))?.cursor).toBe('');
});

test('rows that a pull wrote while others were freed are not taken for older ones', async () => {
  const { station, full } = await makeWorking();
  const row = { ...full, balanceMg: 777_000 };
  const server = answering({
    '/api/sync/pull': () =>
      pullAnswer({ seq: 30, cursor: 'cursor-30', changes: [{ table: 'buckets', id: full.id, row }] }),
  });
  fill(station, (store) => store === 'formulas');
  const recorded = recordOperation(station, relocated(full.id), deps);
  const pairs = new Set<string>();
  for (let n = 0; n < 20; n++) {
    await pullChanges(station, server.deps, () => {});
    const [position, tub] = await station.cache.transaction('r', station.cache.tables, async () =>
      Promise.all([station.cache.meta.get('position'), station.cache.rows('buckets').get(full.id)]),
    );
    if (tub !== undefined) pairs.add(`${position?.seq}: ${tub.balanceMg}`);
  }
  await recorded;
  pairs.delete(`9: ${full.balanceMg}`);
  expect([...pairs]).toEqual(['30: 777000']);
});

test('a device on which not even the position fits counts as not loaded, and shows nothing halfway', async () => {
  const { station, full } = await makeWorking();
  let removed = 0;
  fill(station, (store) => store === 'formulas' && ++removed > 2, 'both');
  await recordOperation(station, relocated(full.id), deps).catch(() => undefined);
  disk?.empty();
  expect(await isLoaded(station)).toBe(false);
  expect(await readShelf(station)).toEqual([]);
});

test('entries that were sent long ago go last, those of two weeks and the unsent stay', async () => {
  const station = await makeStation();
  const [old, recent, unsent] = await Promise.all(
    [0, 1, 2].map(() => recordOperation(station, relocated(uuidv7()), deps)),
  );
  const sent = (at: number) => ({ status: 'sent' as const, changeSeq: 1, sentAt: new Date(at).toISOString() });
  await station.outbox.ops.update(old?.opId ?? '', sent(START.getTime() - 15 * DAY_MS));
  await station.outbox.ops.update(recent?.opId ?? '', sent(START.getTime() - 13 * DAY_MS));
  await station.cache.meta.put({ name: 'position', cursor: 'cursor-9', seq: 9, completeAt: START.toISOString() });
  fill(station, (store) => store === 'ops');
  const last = await recordOperation(station, relocated(uuidv7()), deps);
  const kept = (await station.outbox.ops.toArray()).map(({ opId }) => opId).sort();
  expect(kept).toEqual([recent?.opId, unsent?.opId, last.opId].sort());
});

test('when nothing helps it says what to do, and nothing is half written', async () => {
  const { station, weighing, formula } = await makeWorking();
  const unsent = await recordOperation(station, relocated(uuidv7()), deps);
  fill(station, NEVER);
  const mixed = batchMixed([fresh(uuidv7(), 850_000)], { batchId: weighing.id, formulaId: formula.id });
  await expect(finishWeighing(station, weighing, mixed, deps)).rejects.toThrow(NoRoomError);
  await expect(takeBucketCode(station, START)).rejects.toThrow(/this device is full\. Delete something else/);
  await expect(saveWeighing(station, { ...weighing, additions: [fresh(uuidv7(), 1000)] })).rejects.toThrow(NoRoomError);
  disk?.empty();
  expect((await station.outbox.ops.toArray()).map(({ opId }) => opId)).toEqual([unsent.opId]);
  expect(await station.outbox.weighings.toArray()).toEqual([weighing]);
  expect((await recordOperation(station, relocated(uuidv7()), deps)).deviceSeq).toBe(unsent.deviceSeq + 1);
});

test('an entry that was kept on a full device is sent like any other', async () => {
  const { station, full } = await makeWorking();
  fill(station, (store) => store === 'batches');
  await recordOperation(station, relocated(full.id), deps);
  const server = answering({ '/api/sync/push': (call) => pushAnswer(call, accepted(11)) });
  expect(await pushOutbox(station, server.deps)).toEqual({ kind: 'done' });
});
