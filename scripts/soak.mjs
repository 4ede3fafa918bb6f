import { requireNode } from './ensure-node.mjs';
import { ensurePackages } from './ensure-packages.mjs';
import { packageFile } from './paths.mjs';
import { runNode } from './run-step.mjs';
import { StartError, runCommand, say } from './say.mjs';
import { listenForStop, requireNotStopped } from './stopping.mjs';

/** Other seeds than the suite's. */
const FIRST_SEED = 100_000;

/**
 * `npm run test:soak -- SEEDS ROUNDS`: the suite's tests of faults for longer. Without numbers 20,000 and 200; without the
 * second one a hundredth of the first.
 * @param {string} seeds
 * @param {string} rounds
 * @returns {{ what: string, project: string, file: string, only?: string, env: NodeJS.ProcessEnv }[]}
 */
function soakParts(seeds, rounds) {
  const simulated = { SIMULATION_SEEDS: seeds, SIMULATION_FIRST: String(FIRST_SEED) };
  const killed = { KILL_ROUNDS: rounds };
  const tabs = String(Math.round(Number(rounds) * 2.5));
  return [
    { what: `overlay model, ${seeds} runs`, project: 'sync', file: 'sync/overlay-model', env: { MODEL_RUNS: seeds } },
    {
      what: `simulation, ${seeds} seeds`,
      project: 'sync',
      file: 'sync/simulation',
      only: 'nothing is lost',
      env: simulated,
    },
    { what: `server killed ${rounds} times`, project: 'e2e', file: 'e2e/killed-server', env: killed },
    { what: `tabs killed ${tabs} times`, project: 'e2e', file: 'e2e/killed-tabs', env: { TAB_KILLS: tabs } },
    { what: `PostgreSQL killed ${rounds} times`, project: 'copies', file: 'copies/killed-postgres', env: killed },
  ];
}

await runCommand(async () => {
  requireNode();
  listenForStop();
  ensurePackages();
  const [seeds = '20000', given] = process.argv.slice(2);
  const rounds = given ?? String(Math.max(3, Math.round(Number(seeds) / 100)));
  /** @type {string[]} */
  const lines = [];
  for (const { what, project, file, only, env } of soakParts(seeds, rounds)) {
    say(`\n— ${what}`);
    const words = ['run', '--config', 'tests/vitest.config.ts', '--project', project, `tests/${file}.test.ts`];
    const chosen = only === undefined ? words : [...words, '-t', only];
    const { code } = await runNode([packageFile('vitest/vitest.mjs'), ...chosen], { env });
    requireNotStopped();
    lines.push(`${code === 0 ? 'passed' : 'FAILED'}  ${what}`);
  }
  say(`\n${lines.join('\n')}`);
  if (lines.some((line) => line.startsWith('FAILED'))) throw new StartError('The soak failed for the reason above.');
});
