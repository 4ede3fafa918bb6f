import { type JWTHeaderParameters, type JWTPayload, SignJWT, exportJWK, generateKeyPair } from 'jose';
import { v7 as uuidv7 } from 'uuid';
import { GRANT_AUDIENCE, GRANT_ISSUER, GRANT_TYPE } from '#contract/grant.ts';
import type { Role } from '#contract/roles.ts';
import type { SignInResponse } from '#contract/sign-in.ts';
import { type Browser, type Station, saveSignIn } from '#offline/station.ts';

/** 08:00 of the day on which these tests happen. */
export const START = new Date('2026-11-30T08:00:00.000Z');

export function memoryStorage(): Storage {
  const held = new Map<string, string>();
  return {
    get length() {
      return held.size;
    },
    key: (n) => [...held.keys()][n] ?? null,
    getItem: (key) => held.get(key) ?? null,
    setItem: (key, value) => void held.set(key, value),
    removeItem: (key) => void held.delete(key),
    clear: () => held.clear(),
  };
}

/** A browser whose clock the test sets. */
export function makeBrowser(now: Date = START): Browser & { at: (now: Date) => void } {
  let time = now;
  return { storage: memoryStorage(), now: () => time, at: (next) => (time = next) };
}

const pair = await generateKeyPair('ES256', { extractable: true });
const { x, y } = await exportJWK(pair.publicKey);
export const signingKey = pair.privateKey;
export const publicKeys = {
  keys: [{ kty: 'EC' as const, crv: 'P-256' as const, x: x as string, y: y as string, kid: 'current' }],
};

interface GrantParts {
  claims?: JWTPayload;
  header?: Partial<JWTHeaderParameters>;
  key?: CryptoKey | Uint8Array;
}

interface Given {
  role?: Role;
  shopId?: string;
  personId?: string;
  installId?: string;
  lastSeq?: number;
  grant?: GrantParts;
}

/** What the server answers to a sign-in at START; `grant` bends the token. */
export async function makeSignIn(given: Given = {}): Promise<SignInResponse> {
  const ids = { shop: given.shopId ?? uuidv7(), person: given.personId ?? uuidv7(), station: uuidv7() };
  const role = given.role ?? 'mixer';
  const issued = START.getTime() / 1000;
  const claims: JWTPayload = {
    jti: uuidv7(),
    sub: ids.person,
    name: 'Mixer One',
    station: ids.station,
    shop: ids.shop,
    role,
    iss: GRANT_ISSUER,
    aud: GRANT_AUDIENCE,
    iat: issued,
    exp: issued + 14 * 3600,
    ...given.grant?.claims,
  };
  const grant = await new SignJWT(claims)
    .setProtectedHeader({ alg: 'ES256', kid: 'current', typ: GRANT_TYPE, ...given.grant?.header })
    .sign(given.grant?.key ?? signingKey);
  return {
    serverTime: START.toISOString(),
    shop: { id: ids.shop, name: 'Harbour Ink Room', locale: 'en-GB' },
    person: { id: ids.person, displayName: 'Mixer One', role },
    station: { id: ids.station, name: 'Station 1', isNew: true },
    install: { id: given.installId ?? uuidv7(), codePrefix: 'AC', lastSeq: given.lastSeq ?? 0 },
    grant,
    keys: publicKeys,
  };
}

/** A station of a shop of its own, signed in at START. */
export async function makeStation(given: Given = {}, browser: Browser = makeBrowser()): Promise<Station> {
  return saveSignIn(await makeSignIn(given), browser);
}
