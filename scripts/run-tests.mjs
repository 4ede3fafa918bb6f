import { buildWhenStale } from './build-when-stale.mjs';
import { enterCluster } from './cluster.mjs';
import { requireProxyPrograms } from './proxy-programs.mjs';
import { StartError, say } from './say.mjs';
import { requireNotStopped } from './stopping.mjs';
import { testParts } from './test-parts.mjs';
import { ensureTestTools } from './test-tools.mjs';

/** @typedef {import('./test-parts.mjs').Count} Count */

/**
 * `npm test`: every part, or only those named. The last line printed is "N passed, N failed".
 * @param {string[]} names
 */
export async function runTests(names) {
  const chosen = chooseParts(names);
  if (chosen.some(({ needs }) => needs.includes('browser'))) ensureTestTools();
  if (chosen.some(({ needs }) => needs.includes('proxies'))) requireProxyPrograms();
  const total = chosen.some(({ needs }) => needs.includes('database'))
    ? await withTestCluster(() => runParts(chosen))
    : await runParts(chosen);
  say(`\n${total.passed} passed, ${total.failed} failed`);
  if (total.failed > 0 || total.passed === 0) process.exitCode = 1;
}

/** @param {string[]} names */
function chooseParts(names) {
  const known = [...new Set(testParts.map(({ name }) => name))];
  const wrong = names.find((name) => !known.includes(name));
  if (wrong !== undefined)
    throw new StartError(`There is no test part "${wrong}": name one or more of ${known.join(', ')}.`);
  return testParts.filter(({ name }) => names.length === 0 || names.includes(name));
}

/** Entered here so that the parts find it running instead of making it anew. @param {() => Promise<Count>} work */
async function withTestCluster(work) {
  const cluster = await enterCluster('test-pg', { throwAway: true });
  try {
    return await work();
  } finally {
    await cluster.leave();
  }
}

/** @param {import('./test-parts.mjs').TestPart[]} parts @returns {Promise<Count>} */
async function runParts(parts) {
  const total = { passed: 0, failed: 0 };
  /** @type {string[]} */
  const lines = [];
  for (const { name, what, needs, run } of parts) {
    requireNotStopped();
    say(`\n— ${name}: ${what}`);
    const begun = performance.now();
    const { passed, failed } = await (needs.includes('build') ? afterBuild(run) : run());
    const seconds = ((performance.now() - begun) / 1000).toFixed(1);
    total.passed += passed;
    total.failed += failed;
    lines.push(`${name.padEnd(8)}${what.padEnd(48)}${seconds.padStart(6)} s  ${passed} passed, ${failed} failed`);
  }
  say(`\n${lines.join('\n')}`);
  return total;
}

/** A build that fails is one failed test, so that the other parts still report. @param {() => Promise<Count>} run */
async function afterBuild(run) {
  try {
    await buildWhenStale();
  } catch (error) {
    requireNotStopped();
    if (!(error instanceof StartError)) throw error;
    say(error.message);
    return { passed: 0, failed: 1 };
  }
  return run();
}
