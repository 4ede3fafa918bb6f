import pg from 'pg';
import { v7 as uuid } from 'uuid';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { roles } from '#scripts/databases.mjs';
import { demoSignIns } from '#scripts/demo-sign-ins.mjs';
import type { BenchStation } from '#scripts/bench/sync-stations.ts';
import { opIdsOf, pushOverHttp, readLedger } from '#tests/support/push-over-http.ts';
import { type Copies, openCopies } from './support/copies.ts';
import { pullAll, pullPage } from './support/pull-over-http.ts';
import { sessionWords } from './support/session-words.ts';
import { idsOfShop } from './support/ids-of-shop.ts';
import { runTogether } from './support/run-together.ts';

const [STATIONS, LOGS] = [20, 50];
const [FIRST_SHOP, SECOND_SHOP] = ['mixer@siltlane.example.test', 'mixer@gorsegate.example.test'];
const REQUESTS = 1000;
const ACCEPTED = 'halfpail_pushed_operations_total{outcome="accepted"}';

let copies: Copies;
beforeAll(async () => void (copies = await openCopies()));
afterAll(() => copies.close());

/** The processes that answered, as nginx logged them from the nth request on. */
const answeredBy = (from: number) =>
  new Set(
    copies.balancer
      .passed()
      .slice(from)
      .map(({ upstreams }) => upstreams[0]),
  );

test('who signed in at one process is known to the other', async () => {
  const { baseUrl } = copies.balancer;
  const begun = copies.balancer.passed().length;
  const mixer = demoSignIns.find(({ email }) => email === FIRST_SHOP);
  const headers = { 'Content-Type': 'application/json', Origin: baseUrl };
  const install = uuid();
  const body = JSON.stringify({ ...mixer, role: undefined, installIds: [], newInstallId: install });
  const admitted = await fetch(`${baseUrl}/api/auth/sign-in`, { method: 'POST', headers, body });
  expect(admitted.status).toBe(200);
  const cookie = admitted.headers
    .getSetCookie()
    .map((text) => text.split(';')[0] ?? '')
    .join('; ');
  const renewed = [];
  for (let n = 0; n < 4; n++)
    renewed.push(
      await fetch(`${baseUrl}/api/auth/renew?install=${install}`, {
        method: 'POST',
        headers: { ...headers, Cookie: cookie },
      }),
    );
  expect(renewed.map(({ status }) => status)).toEqual([200, 200, 200, 200]);
  expect(answeredBy(begun).size).toBe(2);
});

test('logs of twenty installs land on both processes, each once, while a cursor wanders between them', async () => {
  const { stations } = await copies.enrol(FIRST_SHOP, STATIONS);
  const [reader] = (await copies.enrol(FIRST_SHOP, 1)).stations as [BenchStation];
  const { baseUrl } = copies.balancer;
  const before = [await copies.metric(0, ACCEPTED), await copies.metric(1, ACCEPTED)] as const;
  const begun = copies.balancer.passed().length;
  const transactions = await copies.pooler.countTransactions(copies.shops.name);
  const work = stations.map((station) => station.record(LOGS));
  const pushed = Promise.all(stations.map((station, n) => pushOverHttp(baseUrl, station, work[n] ?? [])));
  const shelf = new Map<string, unknown>();
  const wandered = await pullAll(baseUrl, reader, { cursor: '', limit: 100, shelf });
  expect((await pushed).flatMap(({ outcomes }) => outcomes).every((outcome) => outcome === 'accepted')).toBe(true);
  await pullAll(baseUrl, reader, { cursor: wandered.cursor, limit: 100, shelf });

  const first = (await copies.metric(0, ACCEPTED)) - before[0];
  const second = (await copies.metric(1, ACCEPTED)) - before[1];
  expect(Math.min(first, second)).toBeGreaterThan(0);
  expect(first + second).toBe(STATIONS * LOGS);
  expect(wandered.pages).toBeGreaterThan(5);
  expect(answeredBy(begun).size).toBe(2);
  expect(await copies.pooler.countTransactions(copies.shops.name)).toBeGreaterThan(transactions + STATIONS);
  const fresh = new Map<string, unknown>();
  await pullAll(copies.servers[1].baseUrl, reader, { cursor: '', limit: 2000, shelf: fresh });
  expect(Object.fromEntries(shelf)).toEqual(Object.fromEntries(fresh));
  const ledger = await readLedger(copies.shops.superuserUrl, work.flatMap(opIdsOf));
  expect(ledger).toEqual({ lost: 0, doubled: 0, unbalanced: 0 });
});

test('what was sent to one process and at the same time to the other is taken once, and is a duplicate ever after', async () => {
  const { stations } = await copies.enrol(FIRST_SHOP, 6);
  const work = stations.map((station) => station.record(LOGS));
  const both = await Promise.all(
    stations.flatMap((station, n) =>
      copies.servers.map(({ baseUrl }) => pushOverHttp(baseUrl, station, work[n] ?? [], copies.balancer.baseUrl)),
    ),
  );
  const outcomes = both.flatMap((answer) => answer.outcomes);
  const count = (of: string) => outcomes.filter((outcome) => outcome === of).length;
  expect([count('accepted'), count('duplicate')]).toEqual([6 * LOGS, 6 * LOGS]);
  for (const { baseUrl } of copies.servers) {
    const again = await Promise.all(
      stations.map((station, n) => pushOverHttp(baseUrl, station, work[n] ?? [], copies.balancer.baseUrl)),
    );
    expect(new Set(again.flatMap((answer) => answer.outcomes))).toEqual(new Set(['duplicate']));
  }
  const ledger = await readLedger(copies.shops.superuserUrl, work.flatMap(opIdsOf));
  expect(ledger).toEqual({ lost: 0, doubled: 0, unbalanced: 0 });
});

test('a cursor of one process is continued by the other in the middle of one change', async () => {
  const [station] = (await copies.enrol(FIRST_SHOP, 1)).stations as [BenchStation];
  const [first, second] = copies.servers;
  const page = await pullPage(first.baseUrl, station, '', 40);
  const next = await pullPage(second.baseUrl, station, page.cursor, 40);
  const whole = await pullPage(first.baseUrl, station, '', 80);
  expect([...page.changes, ...next.changes]).toEqual(whole.changes);
});

test(`${REQUESTS} requests of two shops by turns through the same few connections: neither sees or touches the other's`, async () => {
  const both = [await copies.enrol(FIRST_SHOP, 10), await copies.enrol(SECOND_SHOP, 10)] as const;
  const { baseUrl } = copies.balancer;
  const [written, seen] = [[[], []] as [string[], string[]], [new Set<string>(), new Set<string>()] as const];
  const foreign: string[] = [];
  await runTogether(REQUESTS, 24, async (n) => {
    const side = (n % 2) as 0 | 1;
    const station = both[side].stations[(n >> 1) % 10] as BenchStation;
    if (n % 10 < 6) {
      const page = await pullPage(baseUrl, station, '', 30 + (n % 60));
      for (const { id } of page.changes) seen[side].add(id);
    } else if (n % 10 < 8) {
      const ops = station.record(4);
      written[side].push(...opIdsOf(ops));
      expect((await pushOverHttp(baseUrl, station, ops)).outcomes).toEqual(Array(4).fill('accepted'));
    } else {
      // An operation of the other shop's station, whole: its install, person, formula and tub are all foreign here.
      const [other] = (side === 0 ? both[1] : both[0]).stations as [BenchStation];
      const ops = other.record(1);
      foreign.push(...opIdsOf(ops));
      expect((await pushOverHttp(baseUrl, station, ops)).outcomes).toEqual(['rejected']);
    }
  });
  for (const side of [0, 1] as const) {
    const own = await idsOfShop(copies.shops.superuserUrl, both[side].shopId);
    expect(seen[side].size).toBeGreaterThan(20);
    expect([...seen[side]].filter((id) => !own.rows.has(id))).toEqual([]);
    expect(written[side].filter((id) => !own.operations.has(id))).toEqual([]);
    expect(foreign.filter((id) => own.operations.has(id))).toEqual([]);
  }
  expect(written.flat().length + foreign.length).toBeGreaterThan(REQUESTS / 2);
});

test('no statement of the application leaves anything behind on its connection', async () => {
  const found = sessionWords(copies.cluster.log(), `${roles.app}@${copies.shops.name}`);
  expect(found.statements).toBeGreaterThan(5000);
  expect(found.left).toEqual([]);
});

test('a setting, a lock, a listener, a named statement or a temporary table on a connection would be found', async () => {
  const mark = copies.cluster.log().length;
  const client = new pg.Client({ connectionString: copies.shops.superuserUrl });
  await client.connect();
  await client.query('set lock_timeout = 5000');
  await client.query(`select set_config('app.shop_id', $1, false)`, ['x']);
  await client.query('select pg_advisory_lock(1)');
  await client.query('listen tubs');
  await client.query({ name: 'kept', text: 'select 1' });
  await client.query('create temporary table kept (id int)');
  await client.query('declare kept cursor with hold for select 1');
  await client.end();
  const { left } = sessionWords(copies.cluster.log().slice(mark), `postgres@${copies.shops.name}`);
  expect(left).toHaveLength(7);
});
