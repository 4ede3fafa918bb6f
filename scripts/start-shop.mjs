import { astroEnv, buildWhenStale } from './build-when-stale.mjs';
import { demoSignIns } from './demo-sign-ins.mjs';
import { requireGrantKeys } from './grant-keys.mjs';
import { openDatabase } from './open-database.mjs';
import { packageFile } from './paths.mjs';
import { requireFreePort } from './port.mjs';
import { migrateDatabase, seedWhenEmpty } from './prepare-database.mjs';
import { readSettings } from './read-settings.mjs';
import { runNode } from './run-step.mjs';
import { StartError, say } from './say.mjs';
import { spawnServer } from './spawn-server.mjs';
import { requireNotStopped, stopping } from './stopping.mjs';

/** @typedef {import('./read-settings.mjs').Settings} Settings */

/** `npm start`: database, migrations, demo shop, build and server, until Ctrl-C. */
export async function startShop() {
  await withReadyDatabase(async (settings, env) => {
    await buildWhenStale();
    const server = await spawnServer(env);
    if (settings.DEMO_SHOP === 'on') sayDemoSignIns();
    say(`Open ${settings.PUBLIC_ORIGIN ?? server.url} in a browser; Ctrl-C stops everything.`);
    say(`ready ${server.url}`);
    stopping.addEventListener('abort', server.stop);
    const code = await server.ended;
    if (!stopping.aborted) throw new StartError(`The server ended by itself (${code}) for the reason above.`);
    say('Stopped.');
  });
}

/** `npm run dev`: the same database under Astro's development server. */
export async function developShop() {
  await withReadyDatabase(async (settings, env) => {
    if (settings.DEMO_SHOP === 'on') sayDemoSignIns();
    const words = [packageFile('astro/astro.js'), 'dev', '--port', String(settings.PORT), '--host', settings.HOST];
    await runNode(words, { env: { ...env, ...astroEnv } });
  });
}

/** @param {(settings: Settings, env: NodeJS.ProcessEnv) => Promise<void>} work */
async function withReadyDatabase(work) {
  const settings = readSettings(process.env);
  await requireFreePort(settings.PORT, settings.HOST);
  say('Opening the database …');
  const database = await openDatabase(settings);
  try {
    requireNotStopped();
    await migrateDatabase(database);
    if (settings.DEMO_SHOP === 'on') await seedWhenEmpty(database);
    await work(settings, serverEnv(settings, database));
  } finally {
    await database.close();
  }
}

/** @param {Settings} settings @param {import('./databases.mjs').DatabaseUrls} database @returns {NodeJS.ProcessEnv} */
function serverEnv(settings, { appUrl }) {
  return {
    DATABASE_URL: appUrl,
    // The server never holds the owner's rights.
    MIGRATE_DATABASE_URL: undefined,
    PORT: String(settings.PORT),
    HOST: settings.HOST,
    PUBLIC_ORIGIN: settings.PUBLIC_ORIGIN,
    TRUST_PROXY: settings.TRUST_PROXY,
    GRANT_KEYS: settings.GRANT_KEYS ?? requireGrantKeys(),
  };
}

function sayDemoSignIns() {
  say('\nDemo sign-ins (e-mail, password):');
  for (const { role, email, password } of demoSignIns) say(`  ${role.padEnd(24)} ${email.padEnd(32)} ${password}`);
  say('');
}
