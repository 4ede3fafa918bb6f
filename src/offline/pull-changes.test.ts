import { v7 as uuidv7 } from 'uuid';
import { expect, test } from 'vitest';
import { makeProblem } from '#contract/problem.ts';
import { answering, offline, pullAnswer } from '#tests/support/fake-server.ts';
import { relocated } from '#tests/support/operations.ts';
import { componentRow, tubRow } from '#tests/support/rows.ts';
import { makeStation, START } from '#tests/support/station.ts';
import { type LoadProgress, pullChanges } from './pull-changes.ts';
import { recordOperation } from './record-operation.ts';
import { isLoaded, readBucketByCode, readRows, readShelf } from './shown.ts';

const PULL = '/api/sync/pull';
const ignore = () => {};
const put = (row: ReturnType<typeof tubRow>) => ({ table: 'buckets', id: row.id, row });

test('a first load goes page by page from the beginning, and counts what it has', async () => {
  const station = await makeStation();
  const tubs = [tubRow({ code: 'AC111111' }), tubRow({ code: 'AC222222' }), tubRow({ code: 'AC333333' })];
  const pages = [
    { cursor: 'c1', seq: 4, more: true, remaining: 1, changes: tubs.slice(0, 2).map(put) },
    { cursor: 'c2', seq: 9, changes: tubs.slice(2).map(put) },
  ];
  const progress: LoadProgress[] = [];
  const server = answering({ [PULL]: (_, n) => pullAnswer(pages[n]) });
  expect(await isLoaded(station)).toBe(false);
  expect(await pullChanges(station, server.deps, (step) => progress.push(step))).toEqual({ kind: 'done' });
  expect(server.calls.map(({ query }) => query.get('cursor'))).toEqual(['', 'c1']);
  expect(server.calls[0]?.query.get('install')).toBe(station.installId);
  expect(progress.map(({ done, total }) => [done, total])).toEqual([
    [2, 3],
    [3, 3],
  ]);
  expect(progress[1]?.bytes).toBeGreaterThan(progress[0]?.bytes ?? 0);
  expect(await isLoaded(station)).toBe(true);
  expect((await readBucketByCode(station, 'AC333333'))?.id).toBe(tubs[2]?.id);
});

test('a later pull goes on from its cursor, without progress', async () => {
  const station = await makeStation();
  await station.cache.meta.put({ name: 'position', cursor: 'c7', seq: 7, completeAt: START.toISOString() });
  const server = answering({ [PULL]: () => pullAnswer({ cursor: 'c9', seq: 9 }) });
  const progress: LoadProgress[] = [];
  await pullChanges(station, server.deps, (step) => progress.push(step));
  expect(server.calls[0]?.query.get('cursor')).toBe('c7');
  expect(progress).toEqual([]);
  expect(await station.cache.meta.get('position')).toMatchObject({ cursor: 'c9', seq: 9 });
});

test('the pages of a later pull are written together, or none of them', async () => {
  const station = await makeStation();
  await station.cache.meta.put({ name: 'position', cursor: 'c7', seq: 7, completeAt: START.toISOString() });
  const [first, second] = [tubRow({ code: 'AC111111' }), tubRow({ code: 'AC222222' })];
  const half = { cursor: 'c8', seq: 8, more: true, changes: [put(first)] };
  const rest = { cursor: 'c9', seq: 9, changes: [put(second), put({ ...first, balanceMg: 5 })] };
  const cut = answering({ [PULL]: (_, n) => (n === 0 ? pullAnswer(half) : offline()) });
  expect(await pullChanges(station, cut.deps, ignore)).toEqual({ kind: 'offline' });
  expect(await readShelf(station)).toEqual([]);
  expect(await station.cache.meta.get('position')).toMatchObject({ cursor: 'c7', seq: 7 });
  const whole = answering({ [PULL]: (_, n) => pullAnswer([half, rest][n]) });
  expect(await pullChanges(station, whole.deps, ignore)).toEqual({ kind: 'done' });
  expect(whole.calls.map(({ query }) => query.get('cursor'))).toEqual(['c7', 'c8']);
  expect((await readBucketByCode(station, 'AC111111'))?.balanceMg).toBe(5);
  expect(await station.cache.meta.get('position')).toMatchObject({ cursor: 'c9', seq: 9 });
});

test('a row that was deleted is gone, a row that changed is replaced', async () => {
  const station = await makeStation();
  const [kept, gone] = [tubRow(), tubRow()];
  await station.cache.rows('buckets').bulkPut([kept, gone]);
  const changes = [put({ ...kept, balanceMg: 1 }), { table: 'buckets', id: gone.id, deleted: true as const }];
  await pullChanges(station, answering({ [PULL]: () => pullAnswer({ changes }) }).deps, ignore);
  expect(await readShelf(station)).toEqual([{ ...kept, balanceMg: 1 }]);
});

test('a page with a row that does not fit is not taken, cursor included', async () => {
  const station = await makeStation();
  const good = componentRow();
  const changes = [
    { table: 'components', id: good.id, row: good },
    { table: 'buckets', id: uuidv7(), row: { code: 5 } },
  ];
  await expect(pullChanges(station, answering({ [PULL]: () => pullAnswer({ changes }) }).deps, ignore)).rejects.toThrow(
    'code',
  );
  expect(await readRows(station, 'components')).toEqual([]);
  expect(await station.cache.meta.get('position')).toBeUndefined();
});

test('an own entry that the rows contain counts as sent, though the answer to its push was lost', async () => {
  const station = await makeStation();
  const tub = tubRow({ locationId: null });
  await station.cache.rows('buckets').put(tub);
  const operation = await recordOperation(station, relocated(tub.id));
  const own = [{ opId: operation.opId, changeSeq: 5 }];
  const moved = { ...tub, locationId: uuidv7(), balanceMg: 17 };
  await pullChanges(
    station,
    answering({ [PULL]: () => pullAnswer({ seq: 5, own, changes: [put(moved)] }) }).deps,
    ignore,
  );
  expect(await station.outbox.ops.get(operation.opId)).toMatchObject({
    status: 'sent',
    changeSeq: 5,
    sentAt: START.toISOString(),
  });
  expect(await readShelf(station)).toEqual([moved]);
});

test('must-refetch empties the cache and loads from the beginning; what was sent waits until it is found again', async () => {
  const station = await makeStation();
  const stale = tubRow();
  await station.cache.rows('buckets').put(stale);
  await station.cache.meta.put({ name: 'position', cursor: 'old', seq: 90, completeAt: START.toISOString() });
  const [found, lost] = [
    await recordOperation(station, relocated(uuidv7())),
    await recordOperation(station, relocated(uuidv7())),
  ];
  await station.outbox.ops.toCollection().modify({ status: 'sent', changeSeq: 80, sentAt: START.toISOString() });
  const refetch = makeProblem(409, 'must-refetch', 'Load again', 'This device loads the shop again.');
  const tub = tubRow();
  const page = { cursor: 'new', seq: 70, changes: [put(tub)], own: [{ opId: found.opId, changeSeq: 66 }] };
  const server = answering({
    [PULL]: (call) => (call.query.get('cursor') === 'old' ? Response.json(refetch, { status: 409 }) : pullAnswer(page)),
  });
  expect(await pullChanges(station, server.deps, ignore)).toEqual({ kind: 'done' });
  expect(await readRows(station, 'buckets')).toEqual([tub]);
  expect(await station.outbox.ops.get(found.opId)).toMatchObject({ status: 'sent', changeSeq: 66 });
  expect(await station.outbox.ops.get(lost.opId)).toMatchObject({ status: 'waiting', changeSeq: null });
});

test('a server that always asks to load again is asked twice, not forever', async () => {
  const refetch = makeProblem(409, 'must-refetch', 'Load again', 'This device loads the shop again.');
  const server = answering({ [PULL]: () => Response.json(refetch, { status: 409 }) });
  expect((await pullChanges(await makeStation(), server.deps, ignore)).kind).toBe('failed');
  expect(server.calls.length).toBe(2);
});

test.each([
  ['no network', offline, 'offline'],
  ['a portal’s page', () => new Response('<h1>Hotel</h1>', { headers: { 'content-type': 'text/html' } }), 'failed'],
  ['a cut body', () => new Response('{"proto', { headers: { 'content-type': 'application/json' } }), 'failed'],
  ['a 409 of something else', () => new Response('', { status: 409 }), 'failed'],
  ['401', () => new Response('', { status: 401 }), 'signed-out'],
  ['403', () => new Response('', { status: 403 }), 'refused'],
])('%s leaves the cache as it was', async (_, answer, kind) => {
  const station = await makeStation();
  const tub = tubRow();
  await station.cache.rows('buckets').put(tub);
  const position = { name: 'position' as const, cursor: 'c7', seq: 7, completeAt: START.toISOString() };
  await station.cache.meta.put(position);
  expect((await pullChanges(station, answering({ [PULL]: answer }).deps, ignore)).kind).toBe(kind);
  expect(await readShelf(station)).toEqual([tub]);
  expect(await station.cache.meta.get('position')).toEqual(position);
});
