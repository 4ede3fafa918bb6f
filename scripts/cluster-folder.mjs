import { createHash } from 'node:crypto';
import fs from 'node:fs';
import path from 'node:path';
import { dataFolder, projectFolder } from './paths.mjs';
import { StartError } from './say.mjs';

const isRoot = process.getuid?.() === 0;

/** @typedef {{ uid: number, gid: number } | Record<string, never>} Account */

/** Who runs initdb and postgres: both refuse root. @returns {Account} */
export function postgresAccount() {
  if (!isRoot) return {};
  const line = fs
    .readFileSync('/etc/passwd', 'utf8')
    .split('\n')
    .find((entry) => entry.startsWith('postgres:'));
  if (!line)
    throw new StartError(
      'PostgreSQL does not run as root and there is no user "postgres": add one, or start as another user.',
    );
  const [, , uid, gid] = line.split(':');
  return { uid: Number(uid), gid: Number(gid) };
}

/**
 * The folder that holds clusters: .data, or one under /var/tmp when user postgres cannot reach the checkout.
 * @returns {string}
 */
export function clusterHome() {
  const home = !isRoot || reachableByAll(projectFolder) ? dataFolder : outsideFolder();
  fs.mkdirSync(home, { recursive: true });
  if (fs.statSync(home).uid !== process.getuid?.())
    throw new StartError(`${home} belongs to another user: remove it, or start as its owner.`);
  if (isRoot) fs.chmodSync(home, 0o755);
  return home;
}

/** @param {string} folder made for the account alone */
export function makePrivateFolder(folder) {
  fs.mkdirSync(folder, { recursive: true, mode: 0o700 });
  giveToAccount(folder);
}

/** @param {string} file */
export function giveToAccount(file) {
  const { uid, gid } = postgresAccount();
  if (uid !== undefined && gid !== undefined) fs.chownSync(file, uid, gid);
}

function outsideFolder() {
  const mark = createHash('sha256').update(projectFolder).digest('hex').slice(0, 12);
  return path.join('/var/tmp', `halfpail-${mark}`);
}

/** @param {string} folder @returns {boolean} */
function reachableByAll(folder) {
  const open = (fs.statSync(folder).mode & 0o001) !== 0;
  return open && (folder === path.dirname(folder) || reachableByAll(path.dirname(folder)));
}
