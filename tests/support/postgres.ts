import { randomBytes } from 'node:crypto';
import { enterCluster } from '#scripts/cluster.mjs';
import { databaseUrls, dropDatabase, ensureDatabase, ensureRoles, superuserUrl } from '#scripts/databases.mjs';
import { migrateDatabase } from '#scripts/prepare-database.mjs';

export interface TestDatabase {
  /** The owner's connection: migrates, and is held by forced row level security like everybody. */
  ownerUrl: string;
  /** The application's connection. */
  appUrl: string;
}

export interface TestCluster {
  /** A superuser's connection, to look past row level security in an assertion and to make databases. */
  clusterUrl: string;
  /** A migrated database nobody connects to: the template of the others. */
  template: string;
  makeDatabase: () => Promise<TestDatabase>;
  /** Drops what was made and leaves the cluster; the last one to leave stops it. */
  close: () => Promise<void>;
}

/** Enters the throw-away cluster, shared by every test run of this checkout at the moment. */
export async function openTestCluster(): Promise<TestCluster> {
  const cluster = await enterCluster('test-pg', { throwAway: true });
  const clusterUrl = superuserUrl(cluster);
  const run = `run_${randomBytes(4).toString('hex')}`;
  const made: string[] = [];
  const make = async (name: string, template?: string) => {
    made.push(name);
    await ensureDatabase(clusterUrl, name, template);
    return databaseUrls(cluster, name);
  };
  const close = async () => {
    for (const name of made) await dropDatabase(clusterUrl, name);
    await cluster.leave();
  };
  try {
    await ensureRoles(clusterUrl, cluster.passwords);
    const template = `${run}_template`;
    await migrateDatabase(await make(template));
    return { clusterUrl, template, makeDatabase: () => make(`${run}_${made.length}`, template), close };
  } catch (error) {
    await close();
    throw error;
  }
}
