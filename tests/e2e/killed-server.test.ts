import { setTimeout as sleep } from 'node:timers/promises';
import { afterAll, expect, inject, test } from 'vitest';
import { enrolStations } from '#scripts/bench/sync-stations.ts';
import { openDatabase } from '#server/db/connection.ts';
import { findShop } from '#tests/support/find-shop.ts';
import { opIdsOf, pushOverHttp, readLedger } from '#tests/support/push-over-http.ts';
import { startOwnServer } from './support/own-server.ts';

const ROUNDS = Number(process.env['KILL_ROUNDS'] ?? 3);
const [STATIONS, LOGS] = [10, 50];
/** The demo's second shop: the first one's shelf is another test's. */
const MIXER = 'mixer@gorsegate.example.test';

const db = openDatabase(inject('appUrl'), 2);
afterAll(() => db.destroy());

test(
  `a server killed in the middle of pushes ${ROUNDS} times: each log is there once after it is sent to the next one`,
  async () => {
    const stations = await enrolStations(db, await findShop(db, MIXER), STATIONS);
    const sent: string[] = [];
    const count = { answered: 0, unanswered: 0, accepted: 0, duplicate: 0 };
    let server = await startOwnServer(inject('appUrl'));
    for (let round = 0; round < ROUNDS; round++) {
      const work = stations.map((station) => station.record(LOGS));
      sent.push(...work.flatMap(opIdsOf));
      const pushed = Promise.all(stations.map((station, n) => pushOverHttp(server.baseUrl, station, work[n] ?? [])));
      await sleep(40 + ((round * 113) % 350));
      server.kill('SIGKILL');
      const before = await pushed;
      expect(await server.ended).toBe(null);

      server = await startOwnServer(inject('appUrl'));
      for (const [n, station] of stations.entries()) {
        const { outcomes } = await pushOverHttp(server.baseUrl, station, work[n] ?? []);
        const answered = before[n]?.status === 200;
        count[answered ? 'answered' : 'unanswered'] += LOGS;
        expect(outcomes).toHaveLength(LOGS);
        for (const outcome of outcomes) {
          expect(outcome).toMatch(answered ? /^duplicate$/ : /^(accepted|duplicate)$/);
          count[outcome === 'duplicate' ? 'duplicate' : 'accepted'] += 1;
        }
      }
    }
    server.kill('SIGTERM');
    expect(await server.ended).toBe(0);
    const ledger = await readLedger(inject('superuserUrl'), sent);
    console.log(
      `Server killed ${ROUNDS} times, ${sent.length} logs: ${count.answered} answered and ${count.unanswered} not ` +
        `before the kill, sent again ${count.accepted} accepted, ${count.duplicate} duplicate; ` +
        `${ledger.lost} lost, ${ledger.doubled} doubled, ${ledger.unbalanced} unbalanced`,
    );
    expect(ledger).toEqual({ lost: 0, doubled: 0, unbalanced: 0 });
  },
  60_000 + ROUNDS * 30_000,
);
