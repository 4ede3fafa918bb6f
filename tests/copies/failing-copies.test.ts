import net from 'node:net';
import { setTimeout as sleep } from 'node:timers/promises';
import pg from 'pg';
import { afterAll, beforeAll, expect, test } from 'vitest';
import type { BenchStation } from '#scripts/bench/sync-stations.ts';
import { type Answer, opIdsOf, pushOverHttp, readLedger } from '#tests/support/push-over-http.ts';
import { type Copies, openCopies } from './support/copies.ts';
import { pullPage } from './support/pull-over-http.ts';
import { runTogether } from './support/run-together.ts';

const [FIRST_SHOP, SECOND_SHOP] = ['mixer@siltlane.example.test', 'mixer@gorsegate.example.test'];
/** nginx keeps an idle connection to a server so long by default (ngx_http_upstream_module, keepalive_timeout). */
const PROXY_KEEPS_SECONDS = 60;

let copies: Copies;
let idle: { since: number; socket: net.Socket; closedAfterMs: number | undefined };
beforeAll(async () => {
  copies = await openCopies();
  idle = await leaveIdle(copies.servers[1].baseUrl);
});
afterAll(() => copies.close());

/** A connection on which one request was answered, then nothing. */
async function leaveIdle(baseUrl: string) {
  const { hostname, port, host } = new URL(baseUrl);
  const socket = net.connect(Number(port), hostname);
  const left: typeof idle = { since: 0, socket, closedAfterMs: undefined };
  socket.on('close', () => (left.closedAfterMs = performance.now() - left.since));
  socket.write(`GET /api/health HTTP/1.1\r\nHost: ${host}\r\nConnection: keep-alive\r\n\r\n`);
  await new Promise((resolve) => socket.once('data', resolve));
  left.since = performance.now();
  return left;
}

/** Holds what every push of the shop takes first, until it is let go. */
async function holdCounter(shopId: string): Promise<() => Promise<void>> {
  const client = new pg.Client({ connectionString: copies.shops.superuserUrl });
  await client.connect();
  await client.query('begin');
  await client.query('select 1 from shop_sync where shop_id = $1 for update', [shopId]);
  return async () => {
    await client.query('rollback');
    await client.end();
  };
}

/** Pushes of the shop that wait for its counter in PostgreSQL now. */
async function countWaiting(): Promise<number> {
  const client = new pg.Client({ connectionString: copies.shops.superuserUrl });
  await client.connect();
  const { rows } = await client.query<{ n: number }>(
    `select count(*)::int as n from pg_stat_activity where wait_event_type = 'Lock' and query like '%shop_sync%'`,
  );
  await client.end();
  return rows[0]?.n ?? 0;
}

test('more than may wait are asked through nginx to come again, and none of what was taken is lost', async () => {
  const { shopId, stations } = await copies.enrol(FIRST_SHOP, 60);
  const letGo = await holdCounter(shopId);
  const { baseUrl } = copies.balancer;
  const answers: Answer[] = [];
  const ops: unknown[][] = [];
  const statuses: (number | undefined)[] = [];
  const all = Array.from({ length: 1060 }, async (_, n) => {
    const station = stations[n % stations.length] as BenchStation;
    const mine = (ops[n] = station.record(1));
    const answer = await pushOverHttp(baseUrl, station, mine);
    statuses[n] = answer.status;
    answers.push(answer);
  });
  while (answers.length === 0) await sleep(20);
  // Turned away at the gate, not by a lock that took too long: nothing has failed yet.
  expect(copies.servers.map(({ printed }) => printed()).join('')).not.toContain('request failed');
  expect(answers[0]).toMatchObject({ status: 503, retryAfter: expect.stringMatching(/^[2-7]$/) });
  await letGo();
  await Promise.all(all);
  const [taken, turned] = [200, 503].map((wanted) => answers.filter(({ status }) => status === wanted).length);
  console.log(`1060 pushes while one held the shop: ${taken} taken, ${turned} asked to come again`);
  expect((taken ?? 0) + (turned ?? 0)).toBe(1060);
  expect(taken).toBeGreaterThan(0);
  const turnedAway = ops.flatMap((mine, n) => (statuses[n] === 200 ? [] : [{ mine, n }]));
  await runTogether(turnedAway.length, 16, async (at) => {
    const { mine, n } = turnedAway[at] as { mine: unknown[]; n: number };
    const again = await pushOverHttp(baseUrl, stations[n % stations.length] as BenchStation, mine);
    expect(again.outcomes[0]).toMatch(/^(accepted|duplicate)$/);
  });
  const ledger = await readLedger(copies.shops.superuserUrl, ops.flatMap(opIdsOf));
  expect(ledger).toEqual({ lost: 0, doubled: 0, unbalanced: 0 });
});

test('one told to stop finishes what it began, and nginx goes on with the other without one failed request', async () => {
  const { shopId, stations } = await copies.enrol(FIRST_SHOP, 4);
  const [other] = (await copies.enrol(SECOND_SHOP, 1)).stations as [BenchStation];
  const { baseUrl } = copies.balancer;
  const letGo = await holdCounter(shopId);
  const work = stations.map((station) => station.record(50));
  const pushed = Promise.all(stations.map((station, n) => pushOverHttp(baseUrl, station, work[n] ?? [])));
  while ((await countWaiting()) < 4) await sleep(20);
  copies.servers[0].kill('SIGTERM');
  await sleep(300);
  for (let n = 0; n < 20; n++) expect((await pullPage(baseUrl, other, '', 10)).changes).toHaveLength(10);
  await letGo();
  const answers = await pushed;
  expect(answers.map(({ status }) => status)).toEqual([200, 200, 200, 200]);
  expect(answers.flatMap(({ outcomes }) => outcomes)).toEqual(Array(200).fill('accepted'));
  expect(await copies.servers[0].ended).toBe(0);
  for (let n = 0; n < 20; n++) expect((await pullPage(baseUrl, other, '', 10)).changes).toHaveLength(10);
  await copies.startAgain(0);
});

test('one killed in the middle of pushes: what was not answered is sent again through nginx, and each log is there once', async () => {
  const { stations } = await copies.enrol(FIRST_SHOP, 20);
  const { baseUrl } = copies.balancer;
  const work = stations.map((station) => station.record(50));
  // nginx counts it as failed for two seconds after it was stopped.
  while ((await copies.metric(0, LIVES)) === 0) await ask(20);
  const pushed = Promise.all(stations.map((station, n) => pushOverHttp(baseUrl, station, work[n] ?? [])));
  await sleep(250);
  copies.servers[0].kill('SIGKILL');
  const before = await pushed;
  expect(await copies.servers[0].ended).toBe(null);
  expect(before.filter(({ status }) => status !== 200).length).toBeGreaterThan(0);
  for (const [n, station] of stations.entries()) {
    const { outcomes } = await pushOverHttp(baseUrl, station, work[n] ?? []);
    const answered = before[n]?.status === 200;
    for (const outcome of outcomes) expect(outcome).toMatch(answered ? /^duplicate$/ : /^(accepted|duplicate)$/);
    expect(outcomes).toHaveLength(50);
  }
  const ledger = await readLedger(copies.shops.superuserUrl, work.flatMap(opIdsOf));
  expect(ledger).toEqual({ lost: 0, doubled: 0, unbalanced: 0 });
  await copies.startAgain(0);
});

/** Of `GET /api/health`, which goes to either process. */
const LIVES = 'halfpail_request_seconds_count{route="GET /api/health",status="200"}';
async function ask(times: number): Promise<void> {
  for (let n = 0; n < times; n++) await fetch(`${copies.balancer.baseUrl}/api/health`);
  await sleep(100);
}

test('a server keeps an idle connection for longer than the proxy before it does', async () => {
  const answer = await fetch(`${copies.servers[1].baseUrl}/api/health`);
  const [, seconds] = /timeout=(\d+)/.exec(answer.headers.get('keep-alive') ?? '') ?? [];
  expect(Number(seconds)).toBeGreaterThan(PROXY_KEEPS_SECONDS);
  const wanted = (PROXY_KEEPS_SECONDS + 1) * 1000;
  await sleep(Math.max(0, wanted - (performance.now() - idle.since)));
  expect(idle.closedAfterMs ?? Number.POSITIVE_INFINITY).toBeGreaterThan(wanted);
  idle.socket.destroy();
});
