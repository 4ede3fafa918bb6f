import { v7 as uuidv7 } from 'uuid';
import { expect, test } from 'vitest';
import { makeProblem } from '#contract/problem.ts';
import { accepted, answering, pullAnswer, pushAnswer } from '#tests/support/fake-server.ts';
import { relocated } from '#tests/support/operations.ts';
import { tubRow } from '#tests/support/rows.ts';
import { START, makeBrowser, makeSignIn, makeStation } from '#tests/support/station.ts';
import { recordOperation } from './record-operation.ts';
import { isLoaded, readQueue } from './shown.ts';
import type { Station } from './station.ts';
import { syncOnce } from './sync-once.ts';

const [PUSH, PULL, RENEW] = ['/api/sync/push', '/api/sync/pull', '/api/auth/renew'];
const ignore = () => {};
type Call = Parameters<typeof pushAnswer>[0];
const denied = () => new Response('', { status: 401 });

async function stationWithEntry(): Promise<Station> {
  const station = await makeStation();
  await recordOperation(station, relocated(uuidv7()));
  return station;
}

test('sends first, then fetches', async () => {
  const server = answering({ [PUSH]: (call) => pushAnswer(call, accepted(1)), [PULL]: () => pullAnswer() });
  expect(await syncOnce(await stationWithEntry(), server.deps, ignore)).toEqual({ kind: 'done' });
  expect(server.calls.map(({ path }) => path)).toEqual([PUSH, PULL]);
});

test('a push that fails is not followed by a fetch', async () => {
  const server = answering({ [PUSH]: () => new Response('', { status: 503 }), [PULL]: () => pullAnswer() });
  expect((await syncOnce(await stationWithEntry(), server.deps, ignore)).kind).toBe('failed');
  expect(server.calls.map(({ path }) => path)).toEqual([PUSH]);
});

test('entries that the server takes later do not keep the changes of others away', async () => {
  const server = answering({
    [PUSH]: (call) => pushAnswer(call, (opId) => ({ opId, outcome: 'retry' })),
    [PULL]: () => pullAnswer(),
  });
  expect((await syncOnce(await stationWithEntry(), server.deps, ignore)).kind).toBe('held');
  expect(server.calls.map(({ path }) => path)).toEqual([PUSH, PULL]);
});

const revoked = makeProblem(403, 'station-revoked', 'Station revoked', 'This device was revoked. Ask a manager.');
const refuse = () => Response.json(revoked, { status: 403, headers: { 'content-type': 'application/problem+json' } });

test.each([
  ['while it may still hand in', { [PUSH]: (call: Call) => pushAnswer(call, accepted(1)), [PULL]: refuse }],
  ['when it may not even hand in any more', { [PUSH]: refuse }],
])('a revoked station forgets the shop at its next contact %s, and keeps what was recorded', async (_, answers) => {
  const station = await stationWithEntry();
  await station.cache.rows('buckets').put(tubRow());
  await station.cache.meta.put({ name: 'position', cursor: 'c7', seq: 7, completeAt: START.toISOString() });
  const result = await syncOnce(station, answering(answers).deps, ignore);
  expect(result).toEqual({ kind: 'refused', problem: revoked.detail, revoked: true });
  expect(await station.cache.rows('buckets').count()).toBe(0);
  expect(await isLoaded(station)).toBe(false);
  expect(await station.outbox.ops.count()).toBe(1);
});

test('another refusal leaves the rows where they are', async () => {
  const station = await makeStation();
  await station.cache.rows('buckets').put(tubRow());
  const other = () => Response.json(makeProblem(403, 'other', 'No', 'Not now.'), { status: 403 });
  expect((await syncOnce(station, answering({ [PULL]: other }).deps, ignore)).kind).toBe('refused');
  expect(await station.cache.rows('buckets').count()).toBe(1);
});

test('a 401 is answered by one renewal, then all is sent under the new grant', async () => {
  const station = await stationWithEntry();
  const renewed = await makeSignIn({
    shopId: station.shop.id,
    personId: station.person.id,
    installId: station.installId,
  });
  const server = answering({
    [PUSH]: (call, n) => (n === 0 ? denied() : pushAnswer(call, accepted(1))),
    [PULL]: () => pullAnswer(),
    [RENEW]: () => Response.json(renewed),
  });
  const before = station.grant.id;
  expect(await syncOnce(station, server.deps, ignore, makeBrowser())).toEqual({ kind: 'done' });
  expect(server.calls.map(({ path }) => path)).toEqual([PUSH, RENEW, PUSH, PULL]);
  expect(server.calls[1]?.query.get('install')).toBe(station.installId);
  expect(station.grant.id).not.toBe(before);
  expect((await readQueue(station)).waiting).toEqual([]);
});

test.each([
  ['is refused', denied],
  ['meets a portal', () => new Response('<h1>Hotel</h1>', { headers: { 'content-type': 'text/html' } })],
])('a renewal that %s leaves everybody signed out and the queue whole', async (_, renewal) => {
  const station = await stationWithEntry();
  const server = answering({ [PUSH]: denied, [RENEW]: renewal });
  expect(await syncOnce(station, server.deps, ignore, makeBrowser())).toEqual({ kind: 'signed-out' });
  expect(server.calls.map(({ path }) => path)).toEqual([PUSH, RENEW]);
  expect((await readQueue(station)).waiting).toHaveLength(1);
});

test('a renewal for another install is not taken', async () => {
  const station = await stationWithEntry();
  const foreign = await makeSignIn();
  const server = answering({ [PUSH]: denied, [RENEW]: () => Response.json(foreign) });
  expect(await syncOnce(station, server.deps, ignore, makeBrowser())).toEqual({ kind: 'signed-out' });
});
