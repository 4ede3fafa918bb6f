import fs from 'node:fs';
import path from 'node:path';
import { setTimeout as pause } from 'node:timers/promises';

/** @param {number} pid */
export function isAlive(pid) {
  if (!Number.isInteger(pid) || pid <= 0) return false;
  try {
    process.kill(pid, 0);
    return true;
  } catch (error) {
    return /** @type {NodeJS.ErrnoException} */ (error).code === 'EPERM';
  }
}

/**
 * One process at a time through `work`; a lock whose process is gone is taken over.
 * @template T
 * @param {string} file
 * @param {() => Promise<T>} work
 * @returns {Promise<T>}
 */
export async function withLock(file, work) {
  fs.mkdirSync(path.dirname(file), { recursive: true });
  while (!takeLock(file)) await pause(150);
  try {
    return await work();
  } finally {
    fs.rmSync(file, { force: true });
  }
}

/** @param {string} file */
function takeLock(file) {
  try {
    fs.writeFileSync(file, String(process.pid), { flag: 'wx' });
    return true;
  } catch (error) {
    if (/** @type {NodeJS.ErrnoException} */ (error).code !== 'EEXIST') throw error;
    const holder = fs.existsSync(file) ? Number(fs.readFileSync(file, 'utf8')) : 0;
    // A file just created may still be empty: only a written, dead process id frees it.
    if (holder > 0 && !isAlive(holder)) fs.rmSync(file, { force: true });
    return false;
  }
}
