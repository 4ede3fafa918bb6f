import path from 'node:path';
import { fileURLToPath } from 'node:url';

export const projectFolder = path.resolve(path.dirname(fileURLToPath(import.meta.url)), '..');

/** Everything a run leaves behind: clusters, passwords, keys. Never in git. */
export const dataFolder = path.join(projectFolder, '.data');

export const distFolder = path.join(projectFolder, 'dist');

/** @param {string} name path below node_modules, e.g. 'astro/astro.js' */
export function packageFile(name) {
  return path.join(projectFolder, 'node_modules', name);
}
