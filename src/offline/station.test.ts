import { Dexie } from 'dexie';
import { generateKeyPair } from 'jose';
import { expect, test } from 'vitest';
import { makeBrowser, makeSignIn, makeStation, publicKeys, START } from '#tests/support/station.ts';
import { findKey } from './outbox-keys.ts';
import { takeBucketCode } from './record-operation.ts';
import { openStation, saveSignIn, signOut, SignInError } from './station.ts';

const later = (ms: number) => new Date(START.getTime() + ms);
const HOUR = 3_600_000;

test('nobody has signed in: there is no station to open', async () => {
  expect(await openStation(makeBrowser())).toBeUndefined();
});

test('a station opens again without a network with its person, shop and code prefix', async () => {
  const browser = makeBrowser();
  const signedIn = await makeSignIn({ role: 'operator' });
  await saveSignIn(signedIn, browser);
  const station = await openStation(browser);
  expect(station).toMatchObject({
    shop: signedIn.shop,
    installId: signedIn.install.id,
    codePrefix: 'AC',
    person: { id: signedIn.person.id, displayName: 'Mixer One', role: 'operator' },
    grant: { lapsed: false, expiresAt: later(14 * HOUR).getTime() },
  });
});

test('a lapsed grant opens, marked as lapsed', async () => {
  const browser = makeBrowser();
  await makeStation({}, browser);
  browser.at(later(14 * HOUR - 1000));
  expect((await openStation(browser))?.grant.lapsed).toBe(false);
  browser.at(later(14 * HOUR));
  expect((await openStation(browser))?.grant.lapsed).toBe(true);
});

test('a device clock that is set back before the last contact counts as lapsed', async () => {
  const browser = makeBrowser();
  await makeStation({}, browser);
  browser.at(later(-HOUR));
  expect((await openStation(browser))?.grant.lapsed).toBe(true);
});

test('a device clock that is a year off is corrected by the offset of the sign-in', async () => {
  const browser = makeBrowser(later(365 * 24 * HOUR));
  await makeStation({}, browser);
  browser.at(later(365 * 24 * HOUR + 13 * HOUR));
  expect((await openStation(browser))?.grant.lapsed).toBe(false);
});

const other = await generateKeyPair('ES256');
const hmac = new TextEncoder().encode(JSON.stringify(publicKeys.keys[0]));
test.each([
  ['of another key', { key: other.privateKey }],
  ['of another issuer', { claims: { iss: 'elsewhere' } }],
  ['for another audience', { claims: { aud: 'somebody' } }],
  ['of another type', { header: { typ: 'JWT' } }],
  ['of an unknown key id', { header: { kid: 'gone' } }],
  ['signed HS256 with the public key', { header: { alg: 'HS256' }, key: hmac }],
  ['that names a role that does not exist', { claims: { role: 'admin' } }],
])('a grant %s opens nothing', async (_, grant) => {
  const browser = makeBrowser();
  await expect(saveSignIn(await makeSignIn({ grant }), browser)).rejects.toThrow(SignInError);
  expect(await openStation(browser)).toBeUndefined();
});

test('a grant that was changed on the disk opens nothing', async () => {
  const browser = makeBrowser();
  const station = await makeStation({}, browser);
  const grant = (await findKey(station.outbox, 'grant')) as string;
  const [head, body, signature] = grant.split('.') as [string, string, string];
  const claims = JSON.parse(Buffer.from(body, 'base64url').toString()) as object;
  const raised = Buffer.from(JSON.stringify({ ...claims, role: 'owner' })).toString('base64url');
  await station.outbox.keys.put({ name: 'grant', value: `${head}.${raised}.${signature}` });
  expect(await openStation(browser)).toBeUndefined();
});

test('a grant of another shop does not open this one', async () => {
  const browser = makeBrowser();
  const station = await makeStation({}, browser);
  const foreign = await makeSignIn();
  await station.outbox.keys.put({ name: 'grant', value: foreign.grant });
  expect(await openStation(browser)).toBeUndefined();
});

test('two shops on one browser have databases of their own', async () => {
  const browser = makeBrowser();
  const first = await makeStation({}, browser);
  const second = await makeStation({}, browser);
  expect(new Set([first, second].flatMap(({ cache, outbox }) => [cache.name, outbox.name])).size).toBe(4);
  expect((await openStation(browser))?.shop.id).toBe(second.shop.id);
});

test('numbers and codes go on after what the server remembers of a lost outbox', async () => {
  const station = await makeStation({ lastSeq: 40 });
  const fresh = await makeStation();
  expect(await findKey(station.outbox, 'deviceSeq')).toBe(40);
  expect(await findKey(station.outbox, 'tubCounter')).toBe(40);
  expect(await takeBucketCode(station)).not.toBe(await takeBucketCode(fresh));
});

test('a sign-in never sets the counters back', async () => {
  const browser = makeBrowser();
  const signedIn = await makeSignIn({ lastSeq: 3 });
  const station = await saveSignIn(signedIn, browser);
  await station.outbox.keys.put({ name: 'deviceSeq', value: 9 });
  await station.outbox.keys.put({ name: 'tubCounter', value: 2 });
  await saveSignIn(signedIn, browser);
  expect(await findKey(station.outbox, 'deviceSeq')).toBe(9);
  expect(await findKey(station.outbox, 'tubCounter')).toBe(2);
});

test('signing out clears the cache and the way in, never the outbox, and works without a network', async () => {
  const browser = makeBrowser();
  const station = await makeStation({}, browser);
  await station.cache.meta.put({ name: 'position', cursor: '', seq: 1, completeAt: null });
  await signOut(station, browser, () => Promise.reject(new TypeError('offline')));
  expect(await openStation(browser)).toBeUndefined();
  const databases = await Dexie.getDatabaseNames();
  expect(databases).not.toContain(station.cache.name);
  expect(databases).toContain(station.outbox.name);
  expect(await findKey(station.outbox, 'grant')).toBeUndefined();
  expect(await findKey(station.outbox, 'codePrefix')).toBe('AC');
});

test('signing out tells the server', async () => {
  const browser = makeBrowser();
  const asked: unknown[] = [];
  await signOut(await makeStation({}, browser), browser, async (...call) => {
    asked.push(call);
    return new Response(null, { status: 204 });
  });
  expect(asked).toEqual([['/api/auth/sign-out', { method: 'POST' }]]);
});
