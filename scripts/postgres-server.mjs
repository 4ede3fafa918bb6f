import { spawnSync } from 'node:child_process';
import fs from 'node:fs';
import path from 'node:path';
import { giveToAccount, makePrivateFolder, postgresAccount } from './cluster-folder.mjs';
import { isAlive } from './lock.mjs';
import { findFreePort } from './port.mjs';

const fastAndUnsafe = ['-c', 'fsync=off', '-c', 'synchronous_commit=off', '-c', 'full_page_writes=off'];

/** @typedef {{ programs: string, folder: string, unsafe: boolean }} Cluster folder holds data/, and server.log */

/** @param {Cluster} cluster */
const dataOf = (cluster) => path.join(cluster.folder, 'data');

/**
 * Made beside its place and renamed, so that an interrupted initdb is never taken for a cluster.
 * @param {Cluster} cluster
 * @param {string} password of the superuser "postgres"
 */
export function createCluster(cluster, password) {
  const unfinished = path.join(cluster.folder, 'unfinished');
  const passwordFile = path.join(cluster.folder, 'password');
  fs.rmSync(unfinished, { recursive: true, force: true });
  makePrivateFolder(cluster.folder);
  fs.writeFileSync(passwordFile, `${password}\n`, { mode: 0o600 });
  giveToAccount(passwordFile);
  const words = ['-D', unfinished, '-U', 'postgres', '--pwfile', passwordFile, '--auth=scram-sha-256', '-E', 'UTF8'];
  try {
    run(cluster, 'initdb', [
      ...words,
      '--locale=C.UTF-8',
      '--no-instructions',
      ...(cluster.unsafe ? ['--no-sync'] : []),
    ]);
  } finally {
    fs.rmSync(passwordFile, { force: true });
  }
  fs.renameSync(unfinished, dataOf(cluster));
}

/** @param {Cluster} cluster */
export function clusterExists(cluster) {
  return fs.existsSync(path.join(dataOf(cluster), 'PG_VERSION'));
}

/** @param {Cluster} cluster @returns {number | undefined} the port, when the cluster runs */
export function findRunningPort(cluster) {
  const file = path.join(dataOf(cluster), 'postmaster.pid');
  if (!fs.existsSync(file)) return undefined;
  const [pid, , , port] = fs.readFileSync(file, 'utf8').split('\n').map(Number);
  if (pid && port && isAlive(pid) && isPostgres(pid, dataOf(cluster))) return port;
  // Left by a crash; its process id may belong to something else by now, which would keep the server from starting.
  fs.rmSync(file, { force: true });
  return undefined;
}

/** @param {Cluster} cluster @param {number} [given] @returns {Promise<number>} the port on 127.0.0.1: a free one, or the given one */
export async function startCluster(cluster, given) {
  const port = given ?? (await findFreePort());
  const options = [
    '-h',
    '127.0.0.1',
    '-p',
    String(port),
    '-c',
    "unix_socket_directories=''",
    ...(cluster.unsafe ? fastAndUnsafe : []),
  ];
  const log = path.join(cluster.folder, 'server.log');
  run(cluster, 'pg_ctl', ['-D', dataOf(cluster), '-w', '-t', '120', '-l', log, '-o', options.join(' '), 'start']);
  return port;
}

/** @param {Cluster} cluster */
export function stopCluster(cluster) {
  run(cluster, 'pg_ctl', ['-D', dataOf(cluster), '-m', 'fast', '-w', '-t', '120', 'stop']);
}

/** @param {number} pid @param {string} data */
function isPostgres(pid, data) {
  const file = `/proc/${pid}/cmdline`;
  if (!fs.existsSync('/proc/self/cmdline')) return true;
  return fs.existsSync(file) && fs.readFileSync(file, 'utf8').includes(data);
}

/** @param {Cluster} cluster @param {string} program @param {string[]} words */
function run(cluster, program, words) {
  const result = spawnSync(path.join(cluster.programs, program), words, {
    ...postgresAccount(),
    // The server's user may not be able to read the folder the command was typed in.
    cwd: cluster.folder,
    encoding: 'utf8',
    env: { PATH: process.env['PATH'], HOME: cluster.folder, LC_ALL: 'C.UTF-8', TZ: 'UTC' },
    stdio: ['ignore', 'pipe', 'pipe'],
  });
  if (result.error) throw result.error;
  if (result.status !== 0) throw new Error(`${program} failed (${result.status}): ${result.stdout}${result.stderr}`);
}
