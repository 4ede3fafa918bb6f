import { createHash } from 'node:crypto';
import fs from 'node:fs';
import path from 'node:path';
import { keepAssets } from './keep-assets.mjs';
import { withLock } from './lock.mjs';
import { dataFolder, distFolder, packageFile, projectFolder } from './paths.mjs';
import { precompress } from './precompress.mjs';
import { runStep } from './run-step.mjs';
import { say } from './say.mjs';

const sources = ['src', 'public', 'astro.config.mjs', 'package-lock.json', 'tsconfig.json'];
const stampFile = path.join(distFolder, 'built-from');

/** Keeps Astro from calling home. */
export const astroEnv = { ASTRO_TELEMETRY_DISABLED: '1', ASTRO_DISABLE_UPDATE_CHECK: 'true' };

/** Builds into dist unless it was built from exactly these sources. */
export async function buildWhenStale() {
  await withLock(path.join(dataFolder, 'build.lock'), async () => {
    const stamp = hashSources();
    if (fs.existsSync(stampFile) && fs.readFileSync(stampFile, 'utf8') === stamp) return;
    say('Building …');
    fs.rmSync(stampFile, { force: true });
    // A test runner sets NODE_ENV=test, and React would be built for development.
    const env = { ...astroEnv, NODE_ENV: 'production' };
    await runStep('The build', [packageFile('astro/astro.js'), 'build'], { env, quiet: true });
    await precompress(path.join(distFolder, 'client'));
    keepAssets(path.join(distFolder, 'client', '_astro'), path.join(dataFolder, 'builds'));
    fs.writeFileSync(stampFile, stamp);
  });
}

/** By content: times differ after every checkout. */
function hashSources() {
  const hash = createHash('sha256');
  for (const file of sources.flatMap(listFiles).sort()) {
    if (/\.test\.tsx?$/.test(file)) continue;
    hash.update(`${file}\0`).update(fs.readFileSync(path.join(projectFolder, file)));
  }
  return hash.digest('hex');
}

/** @param {string} name @returns {string[]} */
function listFiles(name) {
  const full = path.join(projectFolder, name);
  if (!fs.statSync(full).isDirectory()) return [name];
  const entries = fs.readdirSync(full, { recursive: true, withFileTypes: true });
  return entries
    .filter((entry) => entry.isFile())
    .map((entry) => path.relative(projectFolder, path.join(entry.parentPath, entry.name)));
}
