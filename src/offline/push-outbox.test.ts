import { v7 as uuidv7 } from 'uuid';
import { describe, expect, test } from 'vitest';
import { makeProblem } from '#contract/problem.ts';
import { accepted, answering, offline, pushAnswer } from '#tests/support/fake-server.ts';
import { relocated } from '#tests/support/operations.ts';
import { makeStation, START } from '#tests/support/station.ts';
import { findKey } from './outbox-keys.ts';
import { pushOutbox } from './push-outbox.ts';
import { recordOperation } from './record-operation.ts';
import { readQueue } from './shown.ts';
import type { Station } from './station.ts';

const PUSH = '/api/sync/push';

async function stationWith(entries: number): Promise<Station> {
  const station = await makeStation();
  for (let n = 0; n < entries; n++) await recordOperation(station, relocated(uuidv7()));
  return station;
}

async function statuses(station: Station): Promise<string[]> {
  return (await station.outbox.ops.orderBy('deviceSeq').toArray()).map(({ status }) => status);
}

test('an empty outbox asks nothing', async () => {
  const server = answering({});
  expect(await pushOutbox(await makeStation(), server.deps)).toEqual({ kind: 'done' });
  expect(server.calls).toEqual([]);
});

test('what is accepted or known already counts as sent, with its place in the changes', async () => {
  const station = await stationWith(2);
  const server = answering({
    [PUSH]: (call) =>
      pushAnswer(call, (opId, n) => ({ opId, outcome: n === 0 ? 'accepted' : 'duplicate', changeSeq: 7 + n })),
  });
  expect(await pushOutbox(station, server.deps)).toEqual({ kind: 'done' });
  const sent = await station.outbox.ops.orderBy('deviceSeq').toArray();
  expect(sent.map(({ status, changeSeq, sentAt }) => [status, changeSeq, sentAt])).toEqual([
    ['sent', 7, START.toISOString()],
    ['sent', 8, START.toISOString()],
  ]);
});

test('120 entries go in three pushes of at most 50, in the order of recording', async () => {
  const station = await stationWith(120);
  const server = answering({ [PUSH]: (call) => pushAnswer(call, accepted(1)) });
  await pushOutbox(station, server.deps);
  expect(server.calls.map(({ body }) => body.ops.length)).toEqual([50, 50, 20]);
  const order = server.calls.flatMap(({ body }) => body.ops.map(({ deviceSeq }) => deviceSeq));
  expect(order).toEqual(Array.from({ length: 120 }, (_, n) => n + 1));
});

test('a push stays within 256 KiB', async () => {
  const station = await makeStation();
  const reason = 'x'.repeat(200);
  for (let n = 0; n < 50; n++) {
    const body = { bucketId: uuidv7(), displayedMg: 0, reason, note: 'n'.repeat(2000) };
    await recordOperation(station, { type: 'bucket-discarded', body });
  }
  // Two thousand letters of three bytes each, so that fifty entries are above the limit.
  await station.outbox.ops.toCollection().modify((entry) => {
    if (entry.operation.type === 'bucket-discarded') entry.operation.body.note = '€'.repeat(2000);
  });
  const sizes: number[] = [];
  const server = answering({
    [PUSH]: (call) => {
      sizes.push(new TextEncoder().encode(JSON.stringify(call.body)).length);
      return pushAnswer(call, accepted(1));
    },
  });
  await pushOutbox(station, server.deps);
  expect(sizes.length).toBe(2);
  expect(Math.max(...sizes)).toBeLessThanOrEqual(256 * 1024);
  expect(await statuses(station)).toEqual(Array.from({ length: 50 }, () => 'sent'));
});

test('a refused entry keeps its reason and does not wedge the others', async () => {
  const station = await stationWith(3);
  const problem = makeProblem(422, 'no-such-tub', 'Not accepted', 'There is no such tub in this shop.');
  const server = answering({
    [PUSH]: (call) =>
      pushAnswer(call, (opId, n) => (n === 1 ? { opId, outcome: 'rejected', problem } : accepted(4)(opId))),
  });
  expect(await pushOutbox(station, server.deps)).toEqual({ kind: 'done' });
  expect(await statuses(station)).toEqual(['sent', 'rejected', 'sent']);
  expect((await readQueue(station)).rejected[0]?.problem).toEqual(problem);
});

test('an entry to be retried waits, the others behind it are sent, and the run ends', async () => {
  const station = await stationWith(60);
  const first = (await readQueue(station)).waiting[0]?.opId;
  const server = answering({
    [PUSH]: (call) => pushAnswer(call, (opId) => (opId === first ? { opId, outcome: 'retry' } : accepted(4)(opId))),
  });
  expect((await pushOutbox(station, server.deps)).kind).toBe('held');
  const { waiting } = await readQueue(station);
  expect(waiting.map(({ opId }) => opId)).toEqual([first]);
  expect(server.calls.length).toBe(2);
});

test('however many are to be retried, those behind them are sent', async () => {
  const station = await stationWith(70);
  const last = (await readQueue(station)).waiting.slice(-5).map(({ opId }) => opId);
  const server = answering({
    [PUSH]: (call) =>
      pushAnswer(call, (opId) => (last.includes(opId) ? accepted(4)(opId) : { opId, outcome: 'retry' })),
  });
  expect((await pushOutbox(station, server.deps)).kind).toBe('held');
  const { waiting, sentToday } = await readQueue(station, server.deps.now());
  expect(waiting).toHaveLength(65);
  expect(sentToday.map(({ opId }) => opId)).toEqual(last);
});

describe('settles nothing', () => {
  const html = { headers: { 'content-type': 'text/html' } };
  test.each([
    ['a portal’s page with status 200', () => new Response('<h1>Sign in to the hotel</h1>', html)],
    [
      'a body that was cut off',
      () => new Response('{"protocol":1,', { headers: { 'content-type': 'application/json' } }),
    ],
    ['an answer to another request', (call: Call) => pushAnswer(withRequest(call, uuidv7()), accepted(1))],
    ['another protocol', (call: Call) => changed(call, { protocol: 2 })],
    ['JSON of another shape', () => Response.json({ ok: true })],
    ['an answer that names no entry', (call: Call) => changed(call, { results: [] })],
    ['an answer that names other entries', (call: Call) => changed(call, { results: [accepted(1)(uuidv7())] })],
    ['a status 201', (call: Call) => new Response(pushAnswer(call, accepted(1)).body, { ...json, status: 201 })],
    ['a right answer that is not JSON', (call: Call) => new Response(pushAnswer(call, accepted(1)).body, html)],
    ['a redirect’s end', () => new Response('', { status: 302 })],
    ['a broken server', () => new Response('', { status: 500 })],
  ])('%s', async (_, answer) => {
    const station = await stationWith(1);
    const result = await pushOutbox(station, answering({ [PUSH]: answer as never }).deps);
    expect(['failed', 'held']).toContain(result.kind);
    expect(await statuses(station)).toEqual(['waiting']);
  });

  test('no network', async () => {
    const station = await stationWith(1);
    expect(await pushOutbox(station, answering({ [PUSH]: offline }).deps)).toEqual({ kind: 'offline' });
    expect(await statuses(station)).toEqual(['waiting']);
  });
});

test('401 and 403 say so and keep the queue', async () => {
  const station = await stationWith(1);
  const revoked = makeProblem(403, 'station-revoked', 'Station revoked', 'This device was revoked. Ask a manager.');
  const answer = (status: number, body: unknown) => answering({ [PUSH]: () => Response.json(body, { status }) }).deps;
  expect(await pushOutbox(station, answer(401, {}))).toEqual({ kind: 'signed-out' });
  expect(await pushOutbox(station, answer(403, revoked))).toEqual({
    kind: 'refused',
    problem: revoked.detail,
    revoked: true,
  });
  expect(await statuses(station)).toEqual(['waiting']);
});

test.each([
  [429, '12', 12_000],
  [503, 'Mon, 30 Nov 2026 08:02:00 GMT', 120_000],
  [503, null, null],
  [503, 'soon', null],
])('status %i with Retry-After %s waits %s ms', async (status, header, retryAfterMs) => {
  const station = await stationWith(1);
  const headers: Record<string, string> = header === null ? {} : { 'retry-after': header };
  const server = answering({ [PUSH]: () => new Response('', { status, headers }) });
  expect(await pushOutbox(station, server.deps)).toMatchObject({ kind: 'failed', retryAfterMs });
});

test('the clock’s offset is measured in the middle of the exchange', async () => {
  const station = await stationWith(1);
  const times = [new Date('2026-11-30T07:00:00.000Z'), new Date('2026-11-30T07:00:04.000Z')];
  const server = answering({ [PUSH]: (call) => pushAnswer(call, accepted(1)) });
  await pushOutbox(station, { ...server.deps, now: () => (times.length > 1 ? times.shift() : times[0]) as Date });
  expect(await findKey(station.outbox, 'clock')).toEqual({
    offsetMs: 3_598_000,
    uncertaintyMs: 2000,
    lastContact: START.toISOString(),
  });
});

type Call = Parameters<typeof pushAnswer>[0];
const json = { headers: { 'content-type': 'application/json' } };

function withRequest(call: Call, requestId: string): Call {
  return { ...call, body: { ...call.body, requestId } };
}

function changed(call: Call, change: object): Response {
  const { requestId, ops } = call.body;
  const results = ops.map(({ opId }) => accepted(1)(opId));
  return Response.json({ protocol: 1, requestId, serverTime: START.toISOString(), results, ...change });
}
