import { randomBytes } from 'node:crypto';
import fs from 'node:fs';
import path from 'node:path';
import { clusterHome } from './cluster-folder.mjs';
import { isAlive, withLock } from './lock.mjs';
import { requirePostgresPrograms } from './postgres-programs.mjs';
import { clusterExists, createCluster, findRunningPort, startCluster, stopCluster } from './postgres-server.mjs';

/** @typedef {{ superuser: string, owner: string, app: string }} Passwords */
/** @typedef {{ port: number, passwords: Passwords, leave: () => Promise<void> }} OpenCluster */

/**
 * Enters the private cluster `name`, made and started when needed. Several commands may share it: each signs in with a
 * file named after its process, and the last one to leave stops the server.
 * @param {string} name 'pg', or 'test-pg' for a throw-away one
 * @param {{ throwAway?: boolean }} [options] made anew whenever nobody uses it, and without fsync
 * @returns {Promise<OpenCluster>}
 */
export async function enterCluster(name, { throwAway = false } = {}) {
  const programs = requirePostgresPrograms();
  const home = clusterHome();
  const cluster = { programs, folder: path.join(home, name), unsafe: throwAway };
  const users = path.join(home, `${name}.users`);
  const lock = path.join(home, `${name}.lock`);
  const me = path.join(users, `${process.pid}.${randomBytes(4).toString('hex')}`);

  const opened = await withLock(lock, async () => {
    const running = findRunningPort(cluster);
    if (running === undefined) fs.rmSync(users, { recursive: true, force: true });
    if (running === undefined && throwAway) fs.rmSync(cluster.folder, { recursive: true, force: true });
    const passwords = requirePasswords(path.join(home, `${name}.passwords.json`));
    if (running === undefined && !clusterExists(cluster)) createCluster(cluster, passwords.superuser);
    const port = running ?? (await startCluster(cluster));
    fs.mkdirSync(users, { recursive: true });
    fs.writeFileSync(me, '');
    return { port, passwords };
  });

  const leave = () =>
    withLock(lock, async () => {
      fs.rmSync(me, { force: true });
      const others = fs
        .readdirSync(users)
        .map((name) => Number.parseInt(name, 10))
        .filter(isAlive);
      if (others.length === 0 && findRunningPort(cluster) !== undefined) stopCluster(cluster);
    });
  return { ...opened, leave };
}

/** @param {string} file @returns {Passwords} */
function requirePasswords(file) {
  if (!fs.existsSync(file)) {
    const word = () => randomBytes(24).toString('base64url');
    fs.writeFileSync(file, JSON.stringify({ superuser: word(), owner: word(), app: word() }), { mode: 0o600 });
  }
  return JSON.parse(fs.readFileSync(file, 'utf8'));
}
