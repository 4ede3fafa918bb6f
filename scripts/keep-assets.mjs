import fs from 'node:fs';
import path from 'node:path';

/** A tab that was opened two builds ago still finds the files that it has not loaded yet. */
const MOST_BUILDS = 3;

/**
 * Adds the hashed files of the last builds to those of the newest; after the precache was made, so that only the newest
 * are in it.
 * @param {string} assets the newest build's folder of hashed files
 * @param {string} store where builds are kept between one and the next
 */
export function keepAssets(assets, store) {
  const kept = path.join(store, 'assets');
  fs.mkdirSync(kept, { recursive: true });
  const newest = fs.readdirSync(assets);
  for (const name of newest) fs.copyFileSync(path.join(assets, name), path.join(kept, name));
  const builds = [newest, ...readBuilds(store)].slice(0, MOST_BUILDS);
  const wanted = new Set(builds.flat());
  for (const name of fs.readdirSync(kept)) {
    if (!wanted.has(name)) fs.rmSync(path.join(kept, name));
    else if (!newest.includes(name)) fs.copyFileSync(path.join(kept, name), path.join(assets, name));
  }
  fs.writeFileSync(path.join(store, 'builds.json'), JSON.stringify(builds));
}

/** The names of each build's files, the newest build first. @param {string} store @returns {string[][]} */
function readBuilds(store) {
  const file = path.join(store, 'builds.json');
  return fs.existsSync(file) ? JSON.parse(fs.readFileSync(file, 'utf8')) : [];
}
