import { requireNode } from './ensure-node.mjs';
import { ensurePackages } from './ensure-packages.mjs';
import { runCommand } from './say.mjs';
import { listenForStop } from './stopping.mjs';

await runCommand(async () => {
  requireNode();
  listenForStop();
  ensurePackages();
  const { developShop } = await import('./start-shop.mjs');
  await developShop();
});
