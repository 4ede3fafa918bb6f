import { v7 as uuidv7 } from 'uuid';
import { expect, test } from 'vitest';
import { accepted, answering, pullAnswer, pushAnswer } from '#tests/support/fake-server.ts';
import { relocated } from '#tests/support/operations.ts';
import { tubRow } from '#tests/support/rows.ts';
import { makeBrowser, makeSignIn, makeStation, START } from '#tests/support/station.ts';
import { findKey } from './outbox-keys.ts';
import { pullChanges } from './pull-changes.ts';
import { pushOutbox } from './push-outbox.ts';
import { recordOperation } from './record-operation.ts';
import { requestSignIn } from './request-sign-in.ts';
import { readQueue, readShelf } from './shown.ts';
import { openStation, type Station } from './station.ts';
import { syncOnce } from './sync-once.ts';

const [PUSH, PULL, RENEW] = ['/api/sync/push', '/api/sync/pull', '/api/auth/renew'];
const html = { 'content-type': 'text/html; charset=utf-8' };
const page = '<!doctype html><title>Welcome</title>Accept our terms.';

/** What networks that want something first put in the place of the server's answer. */
const portals: [string, () => Response][] = [
  ['a page', () => new Response(page, { headers: html })],
  ['a page that says 401', () => new Response(page, { status: 401, headers: html })],
  ['a page that says 403', () => new Response(page, { status: 403, headers: html })],
  [
    'a page that asks for a sign-in to the network (RFC 6585, 511)',
    () => new Response(page, { status: 511, headers: html }),
  ],
  ['nothing', () => new Response(null, { status: 204 })],
  ['JSON of its own', () => Response.json({ status: 'captive', venue: 'hotel', serverTime: START.toISOString() })],
  ['JSON that says 409', () => Response.json({ status: 'captive' }, { status: 409 })],
];

/** One tub, one entry that waits. */
async function makeWorking(): Promise<Station> {
  const station = await makeStation();
  const tub = tubRow();
  await station.cache.rows('buckets').put(tub);
  await station.cache.meta.put({ name: 'position', cursor: 'cursor-9', seq: 9, completeAt: START.toISOString() });
  await recordOperation(station, relocated(tub.id), { now: () => START, randomId: uuidv7 });
  return station;
}

async function stateOf(station: Station) {
  return {
    keys: await station.outbox.keys.toArray(),
    ops: await station.outbox.ops.toArray(),
    shelf: await readShelf(station),
    position: await station.cache.meta.toArray(),
  };
}

test.each(portals)('push: %s settles nothing and signs nobody out', async (_, answer) => {
  const station = await makeWorking();
  const before = await stateOf(station);
  expect((await pushOutbox(station, answering({ [PUSH]: answer }).deps)).kind).toBe('failed');
  expect(await stateOf(station)).toEqual(before);
});

test.each(portals)('pull: %s changes no row, forgets none and does not start over', async (_, answer) => {
  const station = await makeWorking();
  const before = await stateOf(station);
  expect((await pullChanges(station, answering({ [PULL]: answer }).deps, () => {})).kind).toBe('failed');
  expect(await stateOf(station)).toEqual(before);
});

test.each(portals)('renewal: %s leaves grant and keys as they were', async (_, answer) => {
  const station = await makeWorking();
  const before = await stateOf(station);
  const denied = () => new Response('', { status: 401 });
  const server = answering({ [PUSH]: denied, [RENEW]: answer });
  expect(await syncOnce(station, server.deps, () => {}, makeBrowser())).toEqual({ kind: 'signed-out' });
  expect(await stateOf(station)).toEqual(before);
});

test.each(portals)('sign-in: %s signs nobody in and keeps nothing', async (_, answer) => {
  const browser = makeBrowser();
  const deps = { ...browser, post: async () => answer(), randomId: uuidv7, persist: async () => true };
  const result = await requestSignIn({ email: 'mixer@shop.example', password: 'six green tubs' }, deps);
  expect(result).toMatchObject({ ok: false });
  expect(await openStation(browser)).toBeUndefined();
});

test('keys and grant that do not belong together never take the place of those that do', async () => {
  const browser = makeBrowser();
  const station = await makeStation({}, browser);
  const before = await findKey(station.outbox, 'grant');
  const ids = { shopId: station.shop.id, personId: station.person.id, installId: station.installId };
  const forged = await makeSignIn({ ...ids, grant: { header: { kid: 'gone' } } });
  const denied = () => new Response('', { status: 401 });
  const server = answering({ [PULL]: denied, [RENEW]: () => Response.json(forged) });
  await syncOnce(station, server.deps, () => {}, browser).catch(() => undefined);
  expect(await findKey(station.outbox, 'grant')).toBe(before);
  expect((await openStation(browser))?.person.id).toBe(station.person.id);
});

test('behind a portal that is left the same entry is sent, once', async () => {
  const station = await makeWorking();
  const [, first] = portals[0] as [string, () => Response];
  const server = answering({
    [PUSH]: (call, n) => (n === 0 ? first() : pushAnswer(call, accepted(10))),
    [PULL]: () => pullAnswer({ seq: 10 }),
  });
  expect((await syncOnce(station, server.deps, () => {})).kind).toBe('failed');
  expect(await syncOnce(station, server.deps, () => {})).toEqual({ kind: 'done' });
  const ids = server.calls.filter(({ path }) => path === PUSH).map(({ body }) => body.ops.map(({ opId }) => opId));
  expect(ids[0]).toEqual(ids[1]);
  expect((await readQueue(station)).waiting).toEqual([]);
});
