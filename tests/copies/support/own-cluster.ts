import { randomBytes } from 'node:crypto';
import fs from 'node:fs';
import os from 'node:os';
import path from 'node:path';
import { setTimeout as sleep } from 'node:timers/promises';
import { giveToAccount } from '#scripts/cluster-folder.mjs';
import { databaseUrls, ensureDatabase, ensureRoles, superuserUrl } from '#scripts/databases.mjs';
import { requirePostgresPrograms } from '#scripts/postgres-programs.mjs';
import { createCluster, findRunningPort, startCluster, stopCluster } from '#scripts/postgres-server.mjs';
import { migrateDatabase, seedWhenEmpty } from '#scripts/prepare-database.mjs';
import { childrenOf, isRunning } from './processes.ts';

export interface OwnCluster {
  port: number;
  passwords: { superuser: string; owner: string; app: string };
  /** A migrated database with the demo shops. */
  makeShops: () => Promise<{ name: string; appUrl: string; superuserUrl: string }>;
  /** SIGKILL to the postmaster and all of its children; ends when the last of them is gone. */
  killAll: () => Promise<number>;
  /** On the same port, after it was killed. */
  startAgain: () => Promise<void>;
  /** All that PostgreSQL has logged; every statement is. */
  log: () => string;
  close: () => Promise<void>;
}

/** A cluster of one test, as durable as a shop's: with fsync, and a commit waits for it. */
export async function startOwnCluster(): Promise<OwnCluster> {
  const programs = requirePostgresPrograms();
  const home = fs.mkdtempSync(path.join(os.tmpdir(), 'halfpail-cluster-'));
  giveToAccount(home);
  const cluster = { programs, folder: path.join(home, 'pg'), unsafe: false };
  const word = () => randomBytes(24).toString('base64url');
  const passwords = { superuser: word(), owner: word(), app: word() };
  createCluster(cluster, passwords.superuser);
  const conf = path.join(cluster.folder, 'data', 'postgresql.conf');
  fs.appendFileSync(conf, "\nlog_statement = 'all'\nlog_line_prefix = '%m [%p] %u@%d '\n");
  const port = await startCluster(cluster);
  const open = { port, passwords, leave: async () => {} };
  await ensureRoles(superuserUrl(open), passwords);
  let made = 0;
  return {
    port,
    passwords,
    makeShops: async () => {
      const name = `shops_${++made}`;
      await ensureDatabase(superuserUrl(open), name);
      const urls = databaseUrls(open, name);
      await migrateDatabase(urls);
      await seedWhenEmpty(urls);
      return { name, appUrl: urls.appUrl, superuserUrl: superuserUrl(open, name) };
    },
    killAll: () => killAll(path.join(cluster.folder, 'data', 'postmaster.pid')),
    startAgain: async () => void (await startCluster(cluster, port)),
    log: () => fs.readFileSync(path.join(cluster.folder, 'server.log'), 'utf8'),
    close: async () => {
      if (findRunningPort(cluster) !== undefined) stopCluster(cluster);
      fs.rmSync(home, { recursive: true, force: true });
    },
  };
}

async function killAll(pidFile: string): Promise<number> {
  const postmaster = Number(fs.readFileSync(pidFile, 'utf8').split('\n')[0]);
  const all = [postmaster, ...childrenOf(postmaster)];
  // The postmaster first: it would start others in place of its children.
  for (const pid of all) if (isRunning(pid)) process.kill(pid, 'SIGKILL');
  while (all.some(isRunning)) await sleep(10);
  return all.length;
}
