import { v7 as uuidv7 } from 'uuid';
import { expect, test } from 'vitest';
import { SETTLED, makeProblem } from '#contract/problem.ts';
import { LARGEST_MASS } from '#contract/identifiers.ts';
import type { Milligrams } from '#domain/mass.ts';
import { accepted, answering, pullAnswer, pushAnswer } from '#tests/support/fake-server.ts';
import { relocated, returned } from '#tests/support/operations.ts';
import { tubRow } from '#tests/support/rows.ts';
import { START, makeStation } from '#tests/support/station.ts';
import { pullChanges } from './pull-changes.ts';
import { pushOutbox } from './push-outbox.ts';
import { RecordError } from './record-error.ts';
import { recordOperation } from './record-operation.ts';
import { readQueue } from './shown.ts';
import type { Station } from './station.ts';
import { canTakeBack, correctEntry, dropEntry, takeBackDrop } from './tray.ts';

const deps = { now: () => START, randomId: uuidv7 };
const why = makeProblem(422, 'sum', 'Not accepted', 'Gross, tare and change do not add up.');

/** An entry that the server refused. */
async function refusedOn(station: Station, body = returned(uuidv7())) {
  const operation = await recordOperation(station, body, deps);
  await station.outbox.ops.update(operation.opId, { status: 'rejected', problem: why });
  return operation;
}
const statusOf = async ({ outbox }: Station, opId: string) => (await outbox.ops.get(opId))?.status;

test('a correction is a new entry that names the old one, which is let go at once', async () => {
  const station = await makeStation();
  const tub = tubRow();
  await station.cache.rows('buckets').put({ ...tub, seen: { [uuidv7()]: 4 } });
  const first = await refusedOn(station, returned(tub.id));
  await recordOperation(station, relocated(tub.id), deps);
  const body = returned(tub.id, { grossMg: 300_000 as Milligrams, deltaMg: -268_000 });
  const second = await correctEntry(station, first.opId, body, deps);
  expect(second).toMatchObject({ supersedes: first.opId, deviceSeq: 3, body: { grossMg: 300_000 } });
  expect(second.opId).not.toBe(first.opId);
  // Its figures were fixed when the first one was recorded, and so is what it had seen.
  expect(second.seen).toEqual(first.seen);
  expect([await statusOf(station, first.opId), await statusOf(station, second.opId)]).toEqual(['dropped', 'waiting']);
});

test('a correction that does not fit the contract changes nothing', async () => {
  const station = await makeStation();
  const first = await refusedOn(station);
  const body = returned(uuidv7(), { grossMg: (LARGEST_MASS + 1) as Milligrams });
  await expect(correctEntry(station, first.opId, body, deps)).rejects.toThrow(RecordError);
  expect(await statusOf(station, first.opId)).toBe('rejected');
  expect(await station.outbox.ops.count()).toBe(1);
});

test('an entry is decided once, however often and in however many tabs the key is hit', async () => {
  const station = await makeStation();
  const first = await refusedOn(station);
  const tries = await Promise.allSettled([
    correctEntry(station, first.opId, returned(uuidv7()), deps),
    dropEntry(station, first.opId, 'Typed twice', deps),
    dropEntry(station, first.opId, 'Typed twice', deps),
  ]);
  expect(tries.filter(({ status }) => status === 'fulfilled')).toHaveLength(1);
  expect((await readQueue(station)).waiting).toHaveLength(1);
});

test('what waits or was sent is not corrected or dropped', async () => {
  const station = await makeStation();
  const { opId } = await recordOperation(station, relocated(uuidv7()), deps);
  await expect(dropEntry(station, opId, 'No', deps)).rejects.toThrow('decided already');
  await expect(correctEntry(station, uuidv7(), relocated(uuidv7()), deps)).rejects.toThrow('decided already');
});

test.each(['', '   '])('a drop for the reason "%s" is not made', async (reason) => {
  const station = await makeStation();
  const first = await refusedOn(station);
  await expect(dropEntry(station, first.opId, reason, deps)).rejects.toThrow('say why');
  expect(await statusOf(station, first.opId)).toBe('rejected');
});

test('a planner may correct and drop nothing', async () => {
  const station = await makeStation();
  const first = await refusedOn(station);
  station.person.role = 'planner';
  await expect(dropEntry(station, first.opId, 'Typed twice', deps)).rejects.toThrow('not for the role of planner');
  expect(await statusOf(station, first.opId)).toBe('rejected');
});

test('a drop that was not sent is taken back: the entry needs a decision again and no number is missing', async () => {
  const station = await makeStation();
  const first = await refusedOn(station);
  const drop = await dropEntry(station, first.opId, ' Typed twice ', deps);
  expect(drop.body).toEqual({ opId: first.opId, reason: 'Typed twice' });
  await takeBackDrop(station, drop.opId);
  expect(await statusOf(station, first.opId)).toBe('rejected');
  expect(await statusOf(station, drop.opId)).toBeUndefined();
  expect((await recordOperation(station, relocated(uuidv7()), deps)).deviceSeq).toBe(drop.deviceSeq);
});

test('a drop that was put on the wire is not taken back, for its answer may have been lost', async () => {
  const station = await makeStation();
  const first = await refusedOn(station);
  const drop = await dropEntry(station, first.opId, 'Typed twice', deps);
  const server = answering({ '/api/sync/push': () => new TypeError('Failed to fetch') });
  expect(await pushOutbox(station, server.deps)).toEqual({ kind: 'offline' });
  const queued = await station.outbox.ops.get(drop.opId);
  expect(queued !== undefined && canTakeBack(queued)).toBe(false);
  await expect(takeBackDrop(station, drop.opId)).rejects.toThrow('cannot be taken back');
  expect(await statusOf(station, first.opId)).toBe('dropped');
});

test('a drop whose answer was lost is sent again', async () => {
  const station = await makeStation();
  const first = await refusedOn(station);
  const drop = await dropEntry(station, first.opId, 'Typed twice', deps);
  const server = answering({
    '/api/sync/push': (call, n) => (n === 0 ? new TypeError('Failed to fetch') : pushAnswer(call, accepted(5))),
  });
  await pushOutbox(station, server.deps);
  expect(await pushOutbox(station, server.deps)).toEqual({ kind: 'done' });
  expect(await statusOf(station, drop.opId)).toBe('sent');
});

test('a drop that is taken back while a push is put together does not leave with it', async () => {
  const station = await makeStation();
  const [one, two] = [await refusedOn(station), await refusedOn(station)];
  const taken = await dropEntry(station, one.opId, 'Typed twice', deps);
  const kept = await dropEntry(station, two.opId, 'Typed twice', deps);
  const server = answering({ '/api/sync/push': (call) => pushAnswer(call, accepted(5)) });
  const [, result] = await Promise.all([takeBackDrop(station, taken.opId), pushOutbox(station, server.deps)]);
  expect(result).toEqual({ kind: 'done' });
  expect(server.calls.flatMap(({ body }) => body.ops.map(({ opId }) => opId))).toEqual([kept.opId]);
});

test('an entry that was settled elsewhere is let go; any other refusal waits for a person', async () => {
  const station = await makeStation();
  const settled = await recordOperation(station, relocated(uuidv7()), deps);
  const refused = await recordOperation(station, relocated(uuidv7()), deps);
  const server = answering({
    '/api/sync/push': (call) =>
      pushAnswer(call, (opId) => ({
        opId,
        outcome: 'rejected',
        problem: opId === settled.opId ? makeProblem(422, SETTLED, 'Not accepted', 'Settled.') : why,
      })),
  });
  await pushOutbox(station, server.deps);
  expect([await statusOf(station, settled.opId), await statusOf(station, refused.opId)]).toEqual([
    'dropped',
    'rejected',
  ]);
});

test('a server of another state is asked again about what it refused: it may have lost that it did', async () => {
  const station = await makeStation();
  const first = await refusedOn(station);
  const again = makeProblem(409, 'must-refetch', 'Load again', 'This device loads the shop again.');
  const server = answering({
    '/api/sync/pull': (_, n) => (n === 0 ? Response.json(again, { status: 409 }) : pullAnswer()),
  });
  await pullChanges(station, server.deps, () => {});
  expect(await statusOf(station, first.opId)).toBe('waiting');
});
