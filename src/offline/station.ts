import type { Role } from '#contract/roles.ts';
import type { SignInResponse } from '#contract/sign-in.ts';
import { Cache } from './cache.ts';
import { keepClock } from './clock.ts';
import { hasLapsed } from './grant-age.ts';
import { enterInstall, leaveInstall, readInstalls } from './installs.ts';
import { findKey, putKey } from './outbox-keys.ts';
import { Outbox } from './outbox.ts';
import { verifyGrant } from './verify-grant.ts';

/** The open station: who works here, for which shop, with which databases. */
export interface Station {
  shop: { id: string; name: string; locale: string };
  station: { id: string; name: string };
  installId: string;
  codePrefix: string;
  person: { id: string; displayName: string; role: Role };
  /** `expiresAt` in ms since 1970; `lapsed` as it was when the station was opened. */
  grant: { id: string; expiresAt: number; lapsed: boolean };
  cache: Cache;
  outbox: Outbox;
}

export interface Browser {
  storage: Storage;
  now: () => Date;
}
const here = (): Browser => ({ storage: localStorage, now: () => new Date() });

/** Opens without a network what the last sign-in left; undefined: somebody must sign in. */
export async function openStation(browser: Browser = here()): Promise<Station | undefined> {
  const { current } = readInstalls(browser.storage);
  if (current === null) return undefined;
  const outbox = new Outbox(current.shopId, current.installId);
  const opened = await openWith(outbox, current, browser.now());
  if (opened === undefined) outbox.close();
  return opened;
}

async function openWith(
  outbox: Outbox,
  { shopId, installId }: { shopId: string; installId: string },
  now: Date,
): Promise<Station | undefined> {
  const [grant, keys, shop, station, codePrefix, clock] = await outbox.transaction('r', outbox.keys, async () =>
    Promise.all([
      findKey(outbox, 'grant'),
      findKey(outbox, 'publicKeys'),
      findKey(outbox, 'shop'),
      findKey(outbox, 'station'),
      findKey(outbox, 'codePrefix'),
      findKey(outbox, 'clock'),
    ]),
  );
  if (!grant || !keys || !shop || !station || !codePrefix) return undefined;
  const claims = await verifyGrant(grant, keys);
  if (claims === undefined || claims.shop !== shop.id || claims.station !== station.id) return undefined;
  const expiresAt = claims.exp * 1000;
  return {
    shop,
    station,
    installId,
    codePrefix,
    person: { id: claims.sub, displayName: claims.name, role: claims.role },
    grant: { id: claims.jti, expiresAt, lapsed: hasLapsed(expiresAt, clock, now) },
    cache: new Cache(shopId, installId),
    outbox,
  };
}

/** An answer whose own grant does not verify; nothing can be opened with it. */
export class SignInError extends Error {
  override name = 'SignInError';
}

/**
 * Keeps what a sign-in or a renewal answered, in the databases of that shop and install; of an answer whose grant does
 * not verify, nothing.
 * @throws SignInError
 */
export async function saveSignIn(response: SignInResponse, browser: Browser = here()): Promise<Station> {
  const { shop, install } = response;
  const claims = await verifyGrant(response.grant, response.keys);
  if (claims === undefined || claims.shop !== shop.id || claims.station !== response.station.id)
    throw new SignInError('The server signed with a key that it does not publish. Show this to a manager.');
  const outbox = new Outbox(shop.id, install.id);
  await outbox.transaction('rw', outbox.keys, async () => {
    await keepCounters(outbox, install.lastSeq);
    const offsetMs = new Date(response.serverTime).getTime() - browser.now().getTime();
    await putKey(outbox, 'codePrefix', install.codePrefix);
    await putKey(outbox, 'grant', response.grant);
    await putKey(outbox, 'publicKeys', response.keys);
    await putKey(outbox, 'shop', shop);
    await putKey(outbox, 'station', { id: response.station.id, name: response.station.name });
    await keepClock(outbox, { offsetMs, uncertaintyMs: 2000, lastContact: response.serverTime });
    if (response.lost !== undefined) await putKey(outbox, 'lost', response.lost);
  });
  const station = await openWith(outbox, { shopId: shop.id, installId: install.id }, browser.now());
  if (station === undefined) throw new SignInError('This browser lost what was just kept. Sign in again.');
  enterInstall(browser.storage, shop.id, install.id);
  return station;
}

/** A server that remembers more than this outbox has seen it lose entries: neither numbers nor codes are given again. */
async function keepCounters(outbox: Outbox, lastSeq: number): Promise<void> {
  if (lastSeq <= ((await findKey(outbox, 'deviceSeq')) ?? 0)) return;
  await putKey(outbox, 'deviceSeq', lastSeq);
  await putKey(outbox, 'tubCounter', Math.max((await findKey(outbox, 'tubCounter')) ?? 0, lastSeq));
}

/** Another tab of this browser may have renewed the grant: the person at work goes on under the new one. */
export async function takeRenewedGrant(station: Station, now: Date): Promise<void> {
  const { shop, installId, person } = station;
  const opened = await openWith(station.outbox, { shopId: shop.id, installId }, now);
  if (opened?.person.id === person.id && opened.grant.expiresAt > station.grant.expiresAt) station.grant = opened.grant;
}

/** Clears what can be pulled again and the way in; what was recorded here stays. */
export async function signOut(station: Station, browser: Browser = here(), post: typeof fetch = fetch): Promise<void> {
  leaveInstall(browser.storage);
  await station.outbox.keys.delete('grant');
  await station.cache.delete();
  // Without a network the session ends by itself on the server.
  await post('/api/auth/sign-out', { method: 'POST' }).catch(() => undefined);
}
