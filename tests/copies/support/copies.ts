import { makeGrantKeys } from '#scripts/grant-keys.mjs';
import { findFreePort } from '#scripts/port.mjs';
import { type BenchStation, enrolStations } from '#scripts/bench/sync-stations.ts';
import { type Database, openDatabase } from '#server/db/connection.ts';
import { type OwnServer, startOwnServer } from '#tests/e2e/support/own-server.ts';
import { findShop } from '#tests/support/find-shop.ts';
import { type Balancer, startBalancer } from './balancer.ts';
import { type OwnCluster, startOwnCluster } from './own-cluster.ts';
import { type Pooler, startPooler } from './pooler.ts';

const METRICS_TOKEN = 'metrics-of-several-copies';

/** Two processes of the built app on one database, behind PgBouncer's transactions and nginx's round robin. */
export interface Copies {
  cluster: OwnCluster;
  pooler: Pooler;
  balancer: Balancer;
  servers: [OwnServer, OwnServer];
  shops: Awaited<ReturnType<OwnCluster['makeShops']>>;
  /** The application's own connections to PostgreSQL, past the pooler. */
  db: Database;
  /** Stations of the shop in which this person works, with the shop's id. */
  enrol: (email: string, count: number) => Promise<{ shopId: string; stations: BenchStation[] }>;
  /** The process anew, where it was; for one that has ended. */
  startAgain: (n: 0 | 1) => Promise<void>;
  /** Value of a counter in a process' metrics; 0 when it is not there yet. */
  metric: (n: 0 | 1, line: string) => Promise<number>;
  close: () => Promise<void>;
}

export async function openCopies(): Promise<Copies> {
  const cluster = await startOwnCluster();
  const shops = await cluster.makeShops();
  const pooler = await startPooler(cluster);
  const port = await findFreePort();
  const publicOrigin = `http://127.0.0.1:${port}`;
  const settings = { GRANT_KEYS: makeGrantKeys(), METRICS_TOKEN, PUBLIC_ORIGIN: publicOrigin, TRUST_PROXY: 'on' };
  const begin = (given = {}) => startOwnServer(pooler.urlOf(shops.name), { ...settings, ...given });
  const servers: [OwnServer, OwnServer] = [await begin(), await begin()];
  const balancer = await startBalancer(port, servers);
  const db = openDatabase(shops.appUrl, 4);
  return {
    cluster,
    pooler,
    balancer,
    servers,
    shops,
    db,
    enrol: async (email, count) => {
      const shopId = await findShop(db, email);
      return { shopId, stations: await enrolStations(db, shopId, count) };
    },
    startAgain: async (n) => {
      servers[n] = await begin({ PORT: new URL(servers[n].baseUrl).port });
    },
    metric: async (n, line) => {
      const headers = { Authorization: `Bearer ${METRICS_TOKEN}` };
      const text = await (await fetch(`${servers[n].baseUrl}/api/metrics`, { headers })).text();
      return Number(
        text
          .split('\n')
          .find((found) => found.startsWith(`${line} `))
          ?.slice(line.length) ?? 0,
      );
    },
    close: async () => {
      await balancer.stop();
      for (const server of servers) server.kill('SIGTERM');
      await Promise.all(servers.map(({ ended }) => ended));
      await db.destroy();
      await pooler.stop();
      await cluster.close();
    },
  };
}
