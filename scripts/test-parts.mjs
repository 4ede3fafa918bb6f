import fs from 'node:fs';
import path from 'node:path';
import { astroEnv } from './build-when-stale.mjs';
import { packageFile, projectFolder } from './paths.mjs';
import { runNode } from './run-step.mjs';
import { checkTableTypes } from './check-table-types.mjs';
import { runVitest } from './run-vitest.mjs';

/** @typedef {{ passed: number, failed: number }} Count */
/** @typedef {'database' | 'build' | 'browser' | 'proxies'} Need */
/** @typedef {{ name: string, what: string, needs: Need[], run: () => Promise<Count> }} TestPart */

const hasSyncTests = fs.existsSync(path.join(projectFolder, 'tests/sync'));

/** In the order they run: the quick ones first. @type {TestPart[]} */
export const testParts = [
  { name: 'lint', what: 'import table and habits (oxlint)', needs: [], run: runLint },
  {
    name: 'lint',
    what: 'the lint rules and the commands themselves',
    needs: ['database'],
    run: () => runVitest('lint'),
  },
  { name: 'unit', what: 'domain, contract, offline', needs: [], run: () => runVitest('unit') },
  { name: 'check', what: 'types (astro check)', needs: [], run: runTypeCheck },
  { name: 'check', what: 'service worker types', needs: [], run: runServiceWorkerCheck },
  {
    name: 'server',
    what: 'table types match the migrations',
    needs: ['database'],
    run: () => countOne(checkTableTypes),
  },
  { name: 'server', what: 'server on PostgreSQL', needs: ['database'], run: () => runVitest('server') },
  ...(hasSyncTests
    ? [
        /** @type {TestPart} */ ({
          name: 'sync',
          what: 'sync under faults',
          needs: ['database'],
          run: () => runVitest('sync'),
        }),
      ]
    : []),
  {
    name: 'e2e',
    what: 'built server and real browser',
    needs: ['database', 'build', 'browser'],
    run: () => runVitest('e2e'),
  },
  {
    name: 'copies',
    what: 'several servers, nginx, PgBouncer, kills',
    needs: ['build', 'proxies'],
    run: () => runVitest('copies'),
  },
];

function runLint() {
  return countOne(async () => (await runNode([packageFile('oxlint/bin/oxlint'), '--deny-warnings'], {})).code === 0);
}

function runTypeCheck() {
  const words = [packageFile('astro/astro.js'), 'check', '--minimumFailingSeverity', 'warning'];
  return countOne(async () => (await runNode(words, { env: astroEnv })).code === 0);
}

/** It has a library of its own (WebWorker), so the main check leaves it out. */
function runServiceWorkerCheck() {
  const words = [packageFile('typescript/bin/tsc'), '--noEmit', '-p', 'src/service-worker/tsconfig.json'];
  return countOne(async () => (await runNode(words, {})).code === 0);
}

/** @param {() => Promise<boolean>} check @returns {Promise<Count>} */
async function countOne(check) {
  const passed = await check();
  return { passed: Number(passed), failed: Number(!passed) };
}
