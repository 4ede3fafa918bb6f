import { v7 as uuidv7 } from 'uuid';
import { expect, test } from 'vitest';
import { readReport } from '#contract/station-report.ts';
import { answering, pullAnswer } from '#tests/support/fake-server.ts';
import { relocated } from '#tests/support/operations.ts';
import { makeBrowser, makeSignIn, makeStation, START } from '#tests/support/station.ts';
import { clockJump } from './clock.ts';
import { type Clock, findKey } from './outbox-keys.ts';
import { pullChanges } from './pull-changes.ts';
import { recordOperation } from './record-operation.ts';
import { saveSignIn, type Station } from './station.ts';

const HOUR = 3_600_000;
const clock = (offsetMs: number, uncertaintyMs = 0): Clock => ({
  offsetMs,
  uncertaintyMs,
  lastContact: START.toISOString(),
});

test.each([
  ['two minutes are no jump', clock(0), clock(120_000), undefined],
  ['more than two minutes set back', clock(0), clock(121_000), -121_000],
  ['more than two minutes ahead', clock(0), clock(-121_000), 121_000],
  ['a year ahead', clock(500), clock(500 - 365 * 24 * HOUR), 365 * 24 * HOUR],
  ['what a slow answer leaves unsure is no jump', clock(0, 5_000), clock(140_000, 30_000), undefined],
  ['the first contact is no jump', undefined, clock(HOUR), undefined],
  ['before any contact there is none', { ...clock(0), lastContact: null }, clock(HOUR), undefined],
])('%s', (_, before, after, jump) => {
  expect(clockJump(before, after)).toBe(jump);
});

/** A contact at which the device's clock shows `now` and the server's START. */
async function pullAt(station: Station, now: Date): Promise<URLSearchParams | undefined> {
  const server = answering({ '/api/sync/pull': () => pullAnswer() });
  await pullChanges(station, { ...server.deps, now: () => now }, () => {});
  return server.calls[0]?.query;
}

test('a clock that jumps between two contacts is found at the next, told, and the offset is right from then on', async () => {
  const station = await makeStation();
  await pullAt(station, START);
  expect(await findKey(station.outbox, 'clockJump')).toBeUndefined();
  await pullAt(station, new Date(START.getTime() + HOUR));
  expect(await findKey(station.outbox, 'clockJump')).toEqual({ at: START.toISOString(), jumpMs: HOUR });
  const now = () => new Date(START.getTime() + HOUR);
  const operation = await recordOperation(station, relocated(uuidv7()), { now, randomId: uuidv7 });
  expect(operation).toMatchObject({ deviceTime: now().toISOString(), clock: { offsetMs: -HOUR } });
});

test('a clock that is set back is found as well, at a sign-in too', async () => {
  const browser = makeBrowser();
  const station = await makeStation({}, browser);
  browser.at(new Date(START.getTime() - HOUR));
  const ids = { shopId: station.shop.id, personId: station.person.id, installId: station.installId };
  await saveSignIn(await makeSignIn(ids), browser);
  expect(await findKey(station.outbox, 'clockJump')).toMatchObject({ jumpMs: -HOUR });
});

test('each fetch says what waits, the last number given, and the offset of the clock', async () => {
  const station = await makeStation();
  await pullAt(station, new Date(START.getTime() - HOUR));
  await recordOperation(station, relocated(uuidv7()));
  await recordOperation(station, relocated(uuidv7()));
  const query = await pullAt(station, START);
  expect(readReport(query?.get('report') ?? null)).toEqual({ waiting: 2, recorded: 2, offsetMs: HOUR });
});

test.each(['', '3', '1:2', 'a:b:c', '1:2:3:4', '-1:2:3', '1:2:99999999999999999', null])(
  'the report %s is none',
  (text) => expect(readReport(text)).toBeUndefined(),
);
