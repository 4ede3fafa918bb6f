import { requireNode } from './ensure-node.mjs';
import { ensurePackages } from './ensure-packages.mjs';
import { packageFile } from './paths.mjs';
import { runStep } from './run-step.mjs';
import { runCommand } from './say.mjs';
import { listenForStop } from './stopping.mjs';

/** Other seeds than the suite's: npm run test:soak -- SEEDS */
const FIRST_SEED = 100_000;

await runCommand(async () => {
  requireNode();
  listenForStop();
  ensurePackages();
  const seeds = process.argv[2] ?? '20000';
  const words = ['run', '--config', 'tests/vitest.config.ts', '--project', 'sync', 'tests/sync/simulation.test.ts'];
  await runStep('The soak', [packageFile('vitest/vitest.mjs'), ...words, '-t', 'nothing is lost'], {
    env: { SIMULATION_SEEDS: seeds, SIMULATION_FIRST: String(FIRST_SEED) },
  });
});
