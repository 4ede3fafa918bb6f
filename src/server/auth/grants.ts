import { SignJWT, importJWK } from 'jose';
import { GRANT_AUDIENCE, GRANT_HOURS, GRANT_ISSUER, GRANT_TYPE, type PublicKeys } from '#contract/grant.ts';
import type { ShopTransaction } from '#server/db/in-shop.ts';
import { env } from '#server/env.ts';
import type { SignedIn } from './sessions.ts';

/** The public halves, current first. */
export function publicGrantKeys(): PublicKeys {
  return { keys: env().GRANT_KEYS.keys.map(({ kty, crv, x, y, kid }) => ({ kty, crv, x, y, kid })) };
}

/** Records and signs who may work on this station without a network, for fourteen hours. */
export async function issueGrant(
  trx: ShopTransaction,
  person: SignedIn,
  stationId: string,
  id: string,
  now: Date,
): Promise<string> {
  const { shopId, personId, role } = person;
  const expiresAt = new Date(now.getTime() + GRANT_HOURS * 3_600_000);
  await trx.insertInto('grants').values({ shopId, id, stationId, personId, role, issuedAt: now, expiresAt }).execute();
  const [current] = env().GRANT_KEYS.keys;
  if (current === undefined) throw new Error('No key signs grants.');
  return new SignJWT({ name: person.displayName, station: stationId, shop: shopId, role })
    .setProtectedHeader({ alg: 'ES256', kid: current.kid, typ: GRANT_TYPE })
    .setIssuer(GRANT_ISSUER)
    .setAudience(GRANT_AUDIENCE)
    .setSubject(personId)
    .setJti(id)
    .setIssuedAt(Math.floor(now.getTime() / 1000))
    .setExpirationTime(Math.floor(expiresAt.getTime() / 1000))
    .sign(await importJWK(current, 'ES256'));
}
