import type { TestProject } from 'vitest/node';
import { buildWhenStale } from '#scripts/build-when-stale.mjs';
import { makeGrantKeys } from '#scripts/grant-keys.mjs';
import { findFreePort } from '#scripts/port.mjs';
import { seedWhenEmpty } from '#scripts/prepare-database.mjs';
import { spawnServer } from '#scripts/spawn-server.mjs';
import { openTestCluster } from '#tests/support/postgres.ts';

declare module 'vitest' {
  interface ProvidedContext {
    baseUrl: string;
    /** The owner's connection. */
    databaseUrl: string;
    /** The application's connection. */
    appUrl: string;
    /** A superuser's connection to the same database, to look past row level security. */
    superuserUrl: string;
    serverPid: number;
  }
}

/** The built server as a process of its own, on a fresh database with the demo shops. */
export default async function setup(project: TestProject) {
  const cluster = await openTestCluster();
  try {
    const database = await cluster.makeDatabase();
    await seedWhenEmpty(database);
    await buildWhenStale();
    const server = await spawnServer({
      DATABASE_URL: database.appUrl,
      GRANT_KEYS: makeGrantKeys(),
      HOST: '127.0.0.1',
      PORT: String(await findFreePort()),
    });
    project.provide('baseUrl', server.url);
    project.provide('databaseUrl', database.ownerUrl);
    project.provide('appUrl', database.appUrl);
    project.provide(
      'superuserUrl',
      Object.assign(new URL(cluster.clusterUrl), { pathname: new URL(database.ownerUrl).pathname }).href,
    );
    project.provide('serverPid', server.pid);
    return async () => {
      server.stop();
      await server.ended;
      await cluster.close();
    };
  } catch (error) {
    await cluster.close();
    throw error;
  }
}
