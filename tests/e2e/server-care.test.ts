import { setTimeout as sleep } from 'node:timers/promises';
import pg from 'pg';
import { v7 as uuid } from 'uuid';
import { afterAll, beforeAll, describe, expect, inject, test } from 'vitest';
import { demoSignIns } from '#scripts/demo-sign-ins.mjs';
import { type OwnServer, startOwnServer } from './support/own-server.ts';

const METRICS_TOKEN = 'metrics-token-of-this-test';
const mixer = demoSignIns.find(({ email }) => email.startsWith('mixer')) as { email: string; password: string };

let server: OwnServer;
let baseUrl: string;

beforeAll(async () => {
  server = await startOwnServer(inject('appUrl'), { LOG_LEVEL: 'info', METRICS_TOKEN });
  baseUrl = server.baseUrl;
}, 60_000);
afterAll(async () => {
  server.kill('SIGTERM');
  await server.ended;
});

async function post(path: string, body: unknown, cookie = ''): Promise<Response> {
  const headers = { 'Content-Type': 'application/json', Origin: baseUrl, Cookie: cookie };
  return fetch(baseUrl + path, { method: 'POST', headers, body: JSON.stringify(body) });
}

/** @returns the cookies, and the sign-in's answer */
async function signIn(password = mixer.password) {
  const response = await post('/api/auth/sign-in', {
    email: mixer.email,
    password,
    installIds: [],
    newInstallId: uuid(),
  });
  const cookies = response.headers.getSetCookie().map((cookie) => cookie.split(';')[0] ?? '');
  return { status: response.status, cookies, text: await response.text() };
}

describe('a server in service', () => {
  test('is alive, and ready while its database answers', async () => {
    expect((await fetch(`${baseUrl}/api/health`)).status).toBe(200);
    expect((await fetch(`${baseUrl}/api/ready`)).status).toBe(200);
  });

  test('tells its metrics to whoever holds the token, with routes and statuses and nobody named', async () => {
    expect((await fetch(`${baseUrl}/api/metrics`)).status).toBe(404);
    const response = await fetch(`${baseUrl}/api/metrics`, { headers: { Authorization: `Bearer ${METRICS_TOKEN}` } });
    expect(response.status).toBe(200);
    const text = await response.text();
    expect(text).toMatch(/halfpail_request_seconds_count\{route="GET \/api\/ready",status="200"\} [1-9]/);
    expect(text).not.toMatch(/[0-9a-f]{8}-[0-9a-f]{4}/);
  });

  test('writes a line a request without password, cookie, token or grant', async () => {
    const admitted = await signIn();
    expect(admitted.status).toBe(200);
    const { grant } = JSON.parse(admitted.text) as { grant: string };
    await signIn('not the password at all');
    await post(
      '/api/sync/push',
      { protocol: 1, requestId: uuid(), ops: [{ opId: uuid() }] },
      admitted.cookies.join('; '),
    );
    await sleep(300);
    const printed = server.printed();
    expect(printed).toContain('"route":"POST /api/auth/sign-in"');
    expect(printed).toContain('"route":"POST /api/sync/push"');
    const secrets = [
      mixer.password,
      'not the password at all',
      grant,
      METRICS_TOKEN,
      ...admitted.cookies.map((cookie) => cookie.split('=')[1] ?? ''),
    ];
    for (const secret of secrets) {
      expect(secret.length).toBeGreaterThan(8);
      expect(printed).not.toContain(secret);
    }
    expect(printed).not.toContain(mixer.email);
  });

  test('answers after eleven wrong passwords with a time to wait', async () => {
    const tries: number[] = [];
    for (let n = 0; n < 11; n++) tries.push((await signIn(`wrong ${n} and wrong again`)).status);
    expect(tries.filter((status) => status === 401).length).toBeGreaterThan(7);
    expect(tries.at(-1)).toBe(429);
  });
});

test('a revoked station is told so by pull and gets no rows; after thirty days its push is told so too', async () => {
  const manager = demoSignIns.find(({ email }) => email.startsWith('manager')) as { email: string; password: string };
  const response = await post('/api/auth/sign-in', { ...manager, installIds: [], newInstallId: uuid() });
  const station = response.headers.getSetCookie().find((cookie) => cookie.includes('station')) ?? '';
  const cookie = station.split(';')[0] ?? '';
  const signedIn = (await response.json()) as { shop: { id: string }; station: { id: string } };
  const pull = () => fetch(`${baseUrl}/api/sync/pull?cursor=`, { headers: { Cookie: cookie } });
  const push = () => post('/api/sync/push', { protocol: 1, requestId: uuid(), ops: [{ opId: uuid() }] }, cookie);
  expect(((await (await pull()).json()) as { changes: unknown[] }).changes.length).toBeGreaterThan(100);
  await revoke(signedIn, '1 minute');
  const refused = await pull();
  expect(refused.status).toBe(403);
  expect(await refused.json()).toMatchObject({ code: 'station-revoked' });
  expect((await push()).status).toBe(200);
  await revoke(signedIn, '31 days');
  const late = await push();
  expect(late.status).toBe(403);
  expect(await late.json()).toMatchObject({ code: 'station-revoked' });
});

async function revoke(of: { shop: { id: string }; station: { id: string } }, ago: string): Promise<void> {
  const client = new pg.Client({ connectionString: inject('appUrl') });
  await client.connect();
  await client.query('begin');
  await client.query(`select set_config('app.shop_id', $1, true)`, [of.shop.id]);
  const change = 'update stations set revoked_at = now() - $3::interval where shop_id = $1 and id = $2';
  expect((await client.query(change, [of.shop.id, of.station.id, ago])).rowCount).toBe(1);
  await client.query('commit');
  await client.end();
}

test('told to stop in the middle of a push, it answers it and only then ends', async () => {
  const office = demoSignIns.find(({ email }) => email.startsWith('owner')) as { email: string; password: string };
  const response = await post('/api/auth/sign-in', { ...office, installIds: [], newInstallId: uuid() });
  const cookie = response.headers
    .getSetCookie()
    .map((text) => text.split(';')[0] ?? '')
    .join('; ');
  const { shop } = (await response.json()) as { shop: { id: string } };
  const other = new pg.Client({ connectionString: inject('appUrl') });
  await other.connect();
  await other.query('begin');
  await other.query(`select set_config('app.shop_id', $1, true)`, [shop.id]);
  await other.query('update shop_sync set seq = seq where shop_id = $1', [shop.id]);
  const opId = uuid();
  const pushed = post('/api/sync/push', { protocol: 1, requestId: uuid(), ops: [{ opId }] }, cookie);
  await sleep(700);
  server.kill('SIGTERM');
  await sleep(700);
  await other.query('rollback');
  const answer = (await (await pushed).json()) as { results: unknown[] };
  expect(answer.results).toMatchObject([{ opId, outcome: 'rejected' }]);
  expect(await server.ended).toBe(0);
  await other.query('begin');
  await other.query(`select set_config('app.shop_id', $1, true)`, [shop.id]);
  const kept = await other.query('select 1 from quarantine where shop_id = $1 and op_id = $2', [shop.id, opId]);
  await other.query('rollback');
  await other.end();
  expect(kept.rowCount).toBe(1);
});
