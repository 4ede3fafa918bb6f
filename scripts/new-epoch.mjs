import { openDatabase } from './open-database.mjs';
import { readSettings } from './read-settings.mjs';
import { runCommand, say } from './say.mjs';
import { startNewEpoch } from './start-new-epoch.mjs';

await runCommand(async () => {
  const database = await openDatabase(readSettings(process.env));
  try {
    const shops = await startNewEpoch(database.ownerUrl);
    say(`A new epoch for ${shops} shops: their stations load again and send again what the backup may lack.`);
  } finally {
    await database.close();
  }
});
