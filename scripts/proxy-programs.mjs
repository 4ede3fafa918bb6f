import fs from 'node:fs';
import path from 'node:path';
import { installDebianPackages } from './apt.mjs';

/** @typedef {{ nginx: string, pgbouncer: string }} ProxyPrograms paths of the two programs */

const names = /** @type {const} */ (['nginx', 'pgbouncer']);

/** What stands before and behind several server processes in a test; installed when missing, never as a service. */
export function requireProxyPrograms() {
  const missing = names.filter((name) => findProgram(name) === undefined);
  if (missing.length > 0) installDebianPackages(missing, 'the tests of several copies', { services: missing });
  const [nginx, pgbouncer] = names.map((name) => {
    const found = findProgram(name);
    if (found === undefined) throw new Error(`${name} is installed but its program was not found`);
    return found;
  });
  return /** @type {ProxyPrograms} */ ({ nginx, pgbouncer });
}

/** @param {string} name */
function findProgram(name) {
  const folders = [...(process.env['PATH'] ?? '').split(':'), '/usr/sbin'];
  return folders.map((folder) => path.join(folder, name)).find((file) => fs.existsSync(file));
}
