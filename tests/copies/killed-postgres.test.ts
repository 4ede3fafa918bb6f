import { setTimeout as sleep } from 'node:timers/promises';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { openDatabase } from '#server/db/connection.ts';
import { type BenchStation, enrolStations } from '#scripts/bench/sync-stations.ts';
import { type OwnServer, startOwnServer } from '#tests/e2e/support/own-server.ts';
import { type Answer, opIdsOf, pushOverHttp, readLedger } from '#tests/support/push-over-http.ts';
import { findShop } from '#tests/support/find-shop.ts';
import { type OwnCluster, startOwnCluster } from './support/own-cluster.ts';
import { type Pooler, startPooler } from './support/pooler.ts';

const ROUNDS = Number(process.env['KILL_ROUNDS'] ?? 3);
const [STATIONS, LOGS] = [10, 50];

let cluster: OwnCluster;
let pooler: Pooler;
let shops: Awaited<ReturnType<OwnCluster['makeShops']>>;
let servers: OwnServer[];

beforeAll(async () => {
  cluster = await startOwnCluster();
  pooler = await startPooler(cluster);
  shops = await cluster.makeShops();
  servers = [await startOwnServer(shops.appUrl), await startOwnServer(pooler.urlOf(shops.name))];
}, 180_000);
afterAll(async () => {
  for (const server of servers) server.kill('SIGTERM');
  await Promise.all(servers.map(({ ended }) => ended));
  await pooler.stop();
  await cluster.close();
}, 60_000);

/** Half of the stations on the process with connections of its own, half on the one behind the pooler. */
const serverOf = (n: number) => servers[n % servers.length]?.baseUrl ?? '';

/** As a station does: again and again until it is taken. */
async function pushUntilTaken(n: number, station: BenchStation, ops: unknown[]): Promise<Answer & { tries: number }> {
  for (let tries = 1; ; tries++) {
    const answer = await pushOverHttp(serverOf(n), station, ops);
    if (answer.status === 200) return { ...answer, tries };
    expect(answer.status).toBe(503);
    expect(Number(answer.retryAfter)).toBeGreaterThan(0);
    await sleep(250);
  }
}

test(
  `PostgreSQL killed in the middle of pushes ${ROUNDS} times: 503 meanwhile, then each log is there once`,
  async () => {
    const db = openDatabase(shops.appUrl, 1);
    const stations = await enrolStations(db, await findShop(db, 'mixer@siltlane.example.test'), STATIONS);
    await db.destroy();
    const sent: string[] = [];
    const count = { processes: 0, answered: 0, unanswered: 0, refused: 0, accepted: 0, duplicate: 0 };
    for (let round = 0; round < ROUNDS; round++) {
      const work = stations.map((station) => station.record(LOGS));
      for (const ops of work) sent.push(...opIdsOf(ops));
      const pushed = Promise.all(stations.map((station, n) => pushOverHttp(serverOf(n), station, work[n] ?? [])));
      await sleep(100 + ((round * 133) % 400));
      count.processes += await cluster.killAll();
      const before = await pushed;
      for (const { status, retryAfter } of before) {
        if (status === 200) count.answered += LOGS;
        else count.unanswered += LOGS;
        if (status !== 200) expect([status, Number(retryAfter) > 0]).toEqual([503, true]);
      }
      for (const { baseUrl } of servers) {
        expect((await fetch(`${baseUrl}/api/health`)).status).toBe(200);
        const ready = await fetch(`${baseUrl}/api/ready`);
        expect([ready.status, Number(ready.headers.get('Retry-After')) > 0]).toEqual([503, true]);
        count.refused += 1;
      }
      await cluster.startAgain();
      const after = await Promise.all(stations.map((station, n) => pushUntilTaken(n, station, work[n] ?? [])));
      for (const [n, { outcomes }] of after.entries()) {
        expect(outcomes).toHaveLength(LOGS);
        for (const outcome of outcomes) {
          expect(outcome).toMatch(before[n]?.status === 200 ? /^duplicate$/ : /^(accepted|duplicate)$/);
          count[outcome === 'duplicate' ? 'duplicate' : 'accepted'] += 1;
        }
      }
    }
    const ledger = await readLedger(shops.superuserUrl, sent);
    console.log(
      `PostgreSQL killed ${ROUNDS} times (${count.processes} processes), ${sent.length} logs: ` +
        `${count.answered} answered and ${count.unanswered} not before the kill, sent again ${count.accepted} accepted, ` +
        `${count.duplicate} duplicate; ${ledger.lost} lost, ${ledger.doubled} doubled, ${ledger.unbalanced} unbalanced; ` +
        `${count.refused} times asked to come again while it was down`,
    );
    // A lost connection is no reason to refuse an entry for good.
    expect(servers.map(({ printed }) => printed()).join('')).not.toContain('operation failed');
    expect(ledger).toEqual({ lost: 0, doubled: 0, unbalanced: 0 });
    expect(sent).toHaveLength(ROUNDS * STATIONS * LOGS);
  },
  60_000 + ROUNDS * 60_000,
);
