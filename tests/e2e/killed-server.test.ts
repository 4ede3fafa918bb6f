import { setTimeout as sleep } from 'node:timers/promises';
import pg from 'pg';
import { v7 as uuid } from 'uuid';
import { afterAll, expect, inject, test } from 'vitest';
import { type PushResponse, PROTOCOL } from '#contract/push.ts';
import { openDatabase } from '#server/db/connection.ts';
import { type BenchStation, enrolStations } from '#scripts/bench/sync-stations.ts';
import { type OwnServer, startOwnServer } from './support/own-server.ts';

const [STATIONS, LOGS] = [10, 50];
const db = openDatabase(inject('appUrl'), 2);
afterAll(() => db.destroy());

/** @returns the outcomes, or undefined when there was no answer */
async function push(
  server: OwnServer,
  station: BenchStation,
  ops: unknown[],
): Promise<PushResponse['results'] | undefined> {
  const response = await fetch(`${server.baseUrl}/api/sync/push`, {
    method: 'POST',
    headers: { 'Content-Type': 'application/json', Origin: server.baseUrl, Cookie: `station=${station.cookie}` },
    body: JSON.stringify({ protocol: PROTOCOL, requestId: uuid(), ops }),
  }).catch(() => undefined);
  return response?.status === 200 ? ((await response.json()) as PushResponse).results : undefined;
}

/** The demo's second shop: the first one's shelf is another test's. */
async function secondShop(): Promise<string> {
  const client = new pg.Client({ connectionString: inject('appUrl') });
  await client.connect();
  const { rows } = await client.query<{ shop_id: string }>(
    `select shop_id from find_sign_in('mixer@gorsegate.example.test')`,
  );
  await client.end();
  return rows[0]?.shop_id ?? '';
}

/** How often the log has each operation of these installs. */
async function stored(stations: readonly BenchStation[]): Promise<number[]> {
  const client = new pg.Client({ connectionString: inject('superuserUrl') });
  await client.connect();
  const { rows } = await client.query<{ n: number }>(
    'select count(*)::int as n from operations where install_id = any($1) group by op_id',
    [stations.map(({ installId }) => installId)],
  );
  await client.end();
  return rows.map(({ n }) => n);
}

test.each([40, 120, 300])(
  'killed %d ms into five hundred logs, the server has each of them once after they are sent again',
  async (ms) => {
    const stations = await enrolStations(db, await secondShop(), STATIONS);
    const work = stations.map((station): [BenchStation, unknown[]] => [station, station.record(LOGS)]);
    const first = await startOwnServer(inject('appUrl'));
    const pushed = Promise.all(work.map(([station, ops]) => push(first, station, ops)));
    await sleep(ms);
    first.kill('SIGKILL');
    const answered = await pushed;
    expect(await first.ended).toBe(null);

    const second = await startOwnServer(inject('appUrl'));
    for (const [n, [station, ops]] of work.entries()) {
      const results = await push(second, station, ops);
      const expected = answered[n] === undefined ? /^(accepted|duplicate)$/ : /^duplicate$/;
      for (const { outcome } of results ?? []) expect(outcome).toMatch(expected);
      expect(results).toHaveLength(LOGS);
    }
    second.kill('SIGTERM');
    expect(await second.ended).toBe(0);
    const counts = await stored(stations);
    expect(counts).toHaveLength(STATIONS * LOGS);
    expect(counts.every((n) => n === 1)).toBe(true);
  },
);
