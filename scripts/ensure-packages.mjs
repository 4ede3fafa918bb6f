import { spawnSync } from 'node:child_process';
import { createHash } from 'node:crypto';
import fs from 'node:fs';
import path from 'node:path';
import { projectFolder } from './paths.mjs';
import { StartError, say } from './say.mjs';

/** Says from which lock file the packages were installed; npm removes it with the packages. */
const stampFile = path.join(projectFolder, 'node_modules/.installed-from');

/** @typedef {Record<string, { version?: string, optional?: boolean }>} LockedPackages */

/** Installs the packages of package-lock.json when they are missing or differ from it. */
export function ensurePackages() {
  const stamp = createHash('sha256')
    .update(fs.readFileSync(path.join(projectFolder, 'package-lock.json')))
    .digest('hex');
  if (fs.existsSync(stampFile) && fs.readFileSync(stampFile, 'utf8') === stamp) return;
  if (packagesMatchTheLock()) return;
  say('Installing packages (a minute or two the first time) …');
  const result = spawnSync('npm', ['ci', '--include=dev', '--no-audit', '--no-fund', '--loglevel=error'], {
    cwd: projectFolder,
    stdio: ['ignore', 'ignore', 'inherit'],
  });
  if (result.error)
    throw new StartError(`npm could not be started (${result.error.message}): install npm, which comes with Node.js.`);
  if (result.status !== 0)
    throw new StartError('The packages could not be installed: "npm ci" failed for the reason above.');
  fs.writeFileSync(stampFile, stamp);
}

/** Compared by version, not by time: a checkout changes times and nothing else. */
function packagesMatchTheLock() {
  const wanted = readPackages('package-lock.json');
  const present = readPackages('node_modules/.package-lock.json');
  return Object.entries(wanted).every(
    ([name, locked]) => name === '' || locked.optional || present[name]?.version === locked.version,
  );
}

/** @param {string} file @returns {LockedPackages} */
function readPackages(file) {
  const full = path.join(projectFolder, file);
  return fs.existsSync(full) ? JSON.parse(fs.readFileSync(full, 'utf8')).packages : {};
}
