import os from 'node:os';
import { setTimeout as sleep } from 'node:timers/promises';
import { sql } from 'kysely';
import { v7 as uuid } from 'uuid';
import { type PushResponse, PROTOCOL } from '#contract/push.ts';
import { type Database, openDatabase } from '#server/db/connection.ts';
import { openTestCluster } from '#tests/support/postgres.ts';
import { type Used, cpuReader, sayUsed } from './bench/cpu-seconds.ts';
import { explainPull, fillMovements } from './bench/pull-cost.ts';
import { quantile } from './bench/quantile.ts';
import { sayShopSize } from './bench/shop-size.ts';
import { type BenchStation, enrolStations } from './bench/sync-stations.ts';
import { buildWhenStale } from './build-when-stale.mjs';
import { makeGrantKeys } from './grant-keys.mjs';
import { findFreePort } from './port.mjs';
import { seedWhenEmpty } from './prepare-database.mjs';
import { spawnServer } from './spawn-server.mjs';

const STATIONS = Number(process.argv[2] ?? 200);
const LOGS = 50;
const SPREAD_MS = 30_000;

const verdict = (met: boolean) => (met ? 'met' : 'missed');

interface Pushed {
  ms: number;
  outcomes: Record<string, number>;
}

async function push(baseUrl: string, station: BenchStation, ops: unknown[]): Promise<Pushed> {
  const started = performance.now();
  const response = await fetch(`${baseUrl}/api/sync/push`, {
    method: 'POST',
    headers: { 'Content-Type': 'application/json', Origin: baseUrl, Cookie: `station=${station.cookie}` },
    body: JSON.stringify({ protocol: PROTOCOL, requestId: uuid(), ops }),
  });
  const outcomes: Record<string, number> = {};
  if (!response.ok) outcomes[`status ${response.status}`] = ops.length;
  else
    for (const { outcome } of ((await response.json()) as PushResponse).results)
      outcomes[outcome] = (outcomes[outcome] ?? 0) + 1;
  return { ms: performance.now() - started, outcomes };
}

/** Pulls that were asked to come again later, or cut off. */
let refusals = 0;
let bytes = 0;

async function pull(
  baseUrl: string,
  station: BenchStation,
  cursor: string,
): Promise<{ ms: number; rows: number; cursor: string }> {
  const started = performance.now();
  let [rows, at, more] = [0, cursor, true];
  while (more) {
    const query = new URLSearchParams({ cursor: at, limit: '2000', install: station.installId });
    const headers = { Cookie: `station=${station.cookie}` };
    const response = await fetch(`${baseUrl}/api/sync/pull?${query}`, { headers }).catch(() => undefined);
    const text = response?.ok === true ? await response.text().catch(() => undefined) : undefined;
    if (text === undefined) {
      refusals += 1;
      await sleep(1000 * Number(response?.headers.get('Retry-After') ?? 1));
      continue;
    }
    bytes += text.length;
    // Not parsed: stations do that on processors of their own.
    const [, next = '', goesOn] = /"cursor":"([^"]*)","seq":\d+,"more":(true|false)/.exec(text.slice(0, 500)) ?? [];
    [rows, at, more] = [rows + text.split('{"table":"').length - 1, next, goesOn === 'true'];
  }
  return { ms: performance.now() - started, rows, cursor: at };
}

function say(what: string, pushed: readonly Pushed[], total: number): void {
  const outcomes: Record<string, number> = {};
  for (const one of pushed)
    for (const [name, n] of Object.entries(one.outcomes)) outcomes[name] = (outcomes[name] ?? 0) + n;
  const times = pushed.map(({ ms }) => ms);
  const counts = Object.entries(outcomes).map(([name, n]) => `${n} ${name}`);
  console.log(
    `${what}: p50 ${quantile(times, 0.5).toFixed(0)} ms, p95 ${quantile(times, 0.95).toFixed(0)} ms, together ${(total / 1000).toFixed(1)} s; ${counts.join(', ')}`,
  );
}

/** All at once, as when the network comes back to the whole shop. */
async function together(what: string, baseUrl: string, work: readonly [BenchStation, unknown[]][]): Promise<number> {
  const started = performance.now();
  const pushed = await Promise.all(work.map(([station, ops]) => push(baseUrl, station, ops)));
  const total = performance.now() - started;
  say(what, pushed, total);
  return total;
}

async function spread(baseUrl: string, stations: readonly BenchStation[]): Promise<void> {
  const started = performance.now();
  const pushed = await Promise.all(
    stations.map(async (station, n) => {
      const ops = station.record(LOGS);
      await sleep((n * SPREAD_MS) / stations.length);
      return push(baseUrl, station, ops);
    }),
  );
  say(`Push spread over ${SPREAD_MS / 1000} s`, pushed, performance.now() - started);
  const p95 = quantile(
    pushed.map(({ ms }) => ms),
    0.95,
  );
  console.log(`  p95 at most 250 ms: ${verdict(p95 <= 250)}`);
}

async function measure(baseUrl: string, db: Database, shopId: string, used: () => Used): Promise<void> {
  let before = used();
  const sayProcessor = () => {
    const after = used();
    console.log(sayUsed(before, after));
    before = after;
  };
  const stations = await enrolStations(db, shopId, STATIONS);
  for (const station of stations.slice(0, 3)) await push(baseUrl, station, station.record(4));
  const known = await pull(baseUrl, stations[0] as BenchStation, '');
  before = used();
  await spread(baseUrl, stations);
  sayProcessor();
  const work = stations.map((station): [BenchStation, unknown[]] => [station, station.record(LOGS)]);
  before = used();
  const first = await together('Push all at once', baseUrl, work);
  console.log(`  at most 5 s together: ${verdict(first <= 5000)}`);
  sayProcessor();
  const again = await together('The same pushed again', baseUrl, work);
  console.log(`  no more than the first: ${verdict(again <= first)} (${(again / first).toFixed(2)})`);
  sayProcessor();
  const started = performance.now();
  const pulled = await Promise.all(stations.map((station) => pull(baseUrl, station, known.cursor)));
  const rows = pulled.reduce((sum, one) => sum + one.rows, 0);
  console.log(
    `Pull of it all at once: p95 ${quantile(
      pulled.map(({ ms }) => ms),
      0.95,
    ).toFixed(
      0,
    )} ms, together ${((performance.now() - started) / 1000).toFixed(1)} s; ${rows} rows, ${(bytes / 1e6).toFixed(0)} MB, asked to come again ${refusals} times`,
  );
  sayProcessor();
}

async function measurePull(db: Database, superuserUrl: string, shopId: string): Promise<void> {
  const buffers: number[] = [];
  for (const movements of [40_000, 1_000_000]) {
    await fillMovements(superuserUrl, shopId, movements);
    const cost = await explainPull(db, shopId, 10);
    buffers.push(cost.buffers);
    console.log(
      `Delta pull of ${cost.rows} rows beside ${movements} movements: ${cost.buffers} buffers, ${cost.ms.toFixed(1)} ms in ${cost.statements} statements`,
    );
  }
  const ratio = (buffers[1] ?? Number.NaN) / (buffers[0] ?? Number.NaN);
  console.log(`  ratio of buffers ${ratio.toFixed(2)} (at most 1.2: ${verdict(ratio <= 1.2)})`);
}

const cluster = await openTestCluster();
try {
  const { ownerUrl, appUrl } = await cluster.makeDatabase();
  const superuserUrl = Object.assign(new URL(cluster.clusterUrl), { pathname: new URL(ownerUrl).pathname }).href;
  await seedWhenEmpty({ ownerUrl, appUrl });
  await buildWhenStale();
  const server = await spawnServer({
    DATABASE_URL: appUrl,
    GRANT_KEYS: makeGrantKeys(),
    HOST: '127.0.0.1',
    PORT: String(await findFreePort()),
  });
  const db = openDatabase(appUrl, 4);
  try {
    const found = await sql<{
      shopId: string;
    }>`select shop_id from find_sign_in('mixer@siltlane.example.test')`.execute(db);
    const shopId = found.rows[0]?.shopId ?? '';
    console.log(
      `Sync, ${STATIONS} stations of one shop, ${LOGS} logs each, Node ${process.version}, ${os.availableParallelism()} cores, load before ${os.loadavg()[0]?.toFixed(1)}`,
    );
    await measure(server.url, db, shopId, await cpuReader(server.pid, appUrl));
    await sayShopSize(superuserUrl);
    await measurePull(db, superuserUrl, shopId);
  } finally {
    await db.destroy();
    server.stop();
    await server.ended;
  }
} finally {
  await cluster.close();
}
