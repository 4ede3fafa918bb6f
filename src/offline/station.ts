import type { Role } from '#contract/roles.ts';
import type { SignInResponse } from '#contract/sign-in.ts';
import { Cache } from './cache.ts';
import { enterInstall, leaveInstall, readInstalls } from './installs.ts';
import { type Clock, findKey, putKey } from './outbox-keys.ts';
import { Outbox } from './outbox.ts';
import { verifyGrant } from './verify-grant.ts';

/** The open station: who works here, for which shop, with which databases. */
export interface Station {
  shop: { id: string; name: string; locale: string };
  station: { id: string; name: string };
  installId: string;
  codePrefix: string;
  person: { id: string; displayName: string; role: Role };
  grant: { id: string; lapsed: boolean };
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
  return {
    shop,
    station,
    installId: current.installId,
    codePrefix,
    person: { id: claims.sub, displayName: claims.name, role: claims.role },
    grant: { id: claims.jti, lapsed: hasLapsed(claims.exp, clock, browser.now()) },
    cache: new Cache(current.shopId, current.installId),
    outbox,
  };
}

/** By the corrected clock; a clock that stands before the last contact counts as lapsed. */
function hasLapsed(expiresAt: number, clock: Clock | undefined, now: Date): boolean {
  const corrected = now.getTime() + (clock?.offsetMs ?? 0);
  const contact = clock?.lastContact === null || clock === undefined ? 0 : new Date(clock.lastContact).getTime();
  return corrected >= expiresAt * 1000 || corrected < contact - 120_000;
}

/** Keeps what a sign-in or a renewal answered, in the databases of that shop and install. */
export async function saveSignIn(response: SignInResponse, browser: Browser = here()): Promise<void> {
  const { shop, install } = response;
  const outbox = new Outbox(shop.id, install.id);
  await outbox.transaction('rw', outbox.keys, async () => {
    const known = (await findKey(outbox, 'deviceSeq')) ?? 0;
    const offsetMs = new Date(response.serverTime).getTime() - browser.now().getTime();
    await putKey(outbox, 'deviceSeq', Math.max(known, install.lastSeq));
    await putKey(outbox, 'codePrefix', install.codePrefix);
    await putKey(outbox, 'grant', response.grant);
    await putKey(outbox, 'publicKeys', response.keys);
    await putKey(outbox, 'shop', shop);
    await putKey(outbox, 'station', { id: response.station.id, name: response.station.name });
    await putKey(outbox, 'clock', { offsetMs, uncertaintyMs: 2000, lastContact: response.serverTime });
  });
  outbox.close();
  enterInstall(browser.storage, shop.id, install.id);
}

/** Clears what can be pulled again and the way in; what was recorded here stays. */
export async function signOut(station: Station, browser: Browser = here(), post: typeof fetch = fetch): Promise<void> {
  await station.outbox.keys.delete('grant');
  await station.cache.delete();
  leaveInstall(browser.storage);
  // Without a network the session ends by itself on the server.
  await post('/api/auth/sign-out', { method: 'POST' }).catch(() => undefined);
}
