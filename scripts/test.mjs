import { requireNode } from './ensure-node.mjs';
import { ensurePackages } from './ensure-packages.mjs';
import { runCommand } from './say.mjs';
import { listenForStop } from './stopping.mjs';

await runCommand(async () => {
  requireNode();
  listenForStop();
  ensurePackages();
  const { runTests } = await import('./run-tests.mjs');
  await runTests(process.argv.slice(2));
});
