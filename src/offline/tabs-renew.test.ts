import { v7 as uuidv7 } from 'uuid';
import { afterEach, expect, test, vi } from 'vitest';
import { accepted, answering, pullAnswer, pushAnswer } from '#tests/support/fake-server.ts';
import { relocated } from '#tests/support/operations.ts';
import { makeBrowser, makeSignIn, makeStation, START } from '#tests/support/station.ts';
import { recordOperation } from './record-operation.ts';
import { openStation, saveSignIn, type Station } from './station.ts';
import type { Surroundings } from './surroundings.ts';
import { type SyncHandle, startSync } from './sync-loop.ts';

const [PUSH, PULL] = ['/api/sync/push', '/api/sync/pull'];
const open: SyncHandle[] = [];
afterEach(() => open.splice(0).forEach((sync) => sync.stop()));
afterEach(() => vi.unstubAllGlobals());

const working = {
  [PUSH]: (call: Parameters<typeof pushAnswer>[0]) => pushAnswer(call, accepted(1)),
  [PULL]: () => pullAnswer(),
};

/** The tabs of one browser, in which nothing wakes by itself. */
function oneLock(): Surroundings {
  let held = false;
  return {
    isOnline: () => true,
    onWake: () => () => {},
    alone: async (_, run) => {
      if (held) return undefined;
      held = true;
      return run().finally(() => (held = false));
    },
    after: () => () => {},
    soon: () => {},
    jitter: () => 0,
  };
}

/** A second tab of the same browser: its own memory, the same databases and lock. */
async function openSecondTab(browser: ReturnType<typeof makeBrowser>): Promise<Station> {
  const station = await openStation(browser);
  if (station === undefined) throw new Error('The second tab does not open.');
  return station;
}

test('three tabs that meet a 401 at once renew once, and all work on under the new grant', async () => {
  const browser = makeBrowser();
  vi.stubGlobal('localStorage', browser.storage);
  const station = await makeStation({}, browser);
  const tabs = [station, await openSecondTab(browser), await openSecondTab(browser)];
  await recordOperation(station, relocated(uuidv7()));
  const ids = { shopId: station.shop.id, personId: station.person.id, installId: station.installId };
  const exp = START.getTime() / 1000 + 20 * 3600;
  const renewal = await makeSignIn({ ...ids, grant: { claims: { exp } } });
  let renewed = false;
  const denied = () => new Response('', { status: 401 });
  const server = answering({
    [PUSH]: (call) => (renewed ? pushAnswer(call, accepted(1)) : denied()),
    [PULL]: () => (renewed ? pullAnswer() : denied()),
    '/api/auth/renew': () => {
      renewed = true;
      return Response.json(renewal);
    },
  });
  const around = oneLock();
  const slow: typeof fetch = async (...words) => {
    await new Promise((resolve) => setTimeout(resolve, 20));
    return server.fetch(...words);
  };
  const syncs = tabs.map((tab) => startSync(tab, { ...server.deps, fetch: slow }, around));
  open.push(...syncs);
  await Promise.all(syncs.map((sync) => sync.sendNow()));
  for (const sync of syncs) await sync.sendNow();
  expect(server.calls.filter(({ path }) => path === '/api/auth/renew')).toHaveLength(1);
  expect(tabs.map(({ grant }) => grant.expiresAt)).toEqual([exp, exp, exp].map((at) => at * 1000));
});

test('the grant of another person, who signed in in another tab, is not worked under', async () => {
  const browser = makeBrowser();
  const station = await makeStation({}, browser);
  const before = station.grant.id;
  const exp = START.getTime() / 1000 + 20 * 3600;
  await saveSignIn(
    await makeSignIn({ shopId: station.shop.id, installId: station.installId, grant: { claims: { exp } } }),
    browser,
  );
  const sync = startSync(station, answering(working).deps, oneLock());
  open.push(sync);
  await sync.sendNow();
  expect(station.grant.id).toBe(before);
});
