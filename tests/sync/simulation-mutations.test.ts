import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { makeFreshDatabase } from '#tests/support/fresh-database.ts';
import { brokenInvariants } from './invariants.ts';
import { mutations } from './mutations.ts';
import { simulate } from './simulate.ts';
import { type SimulatedDatabase, openSimulatedDatabase } from './simulated-database.ts';

let fresh: Awaited<ReturnType<typeof makeFreshDatabase>>;
let database: SimulatedDatabase;
beforeAll(async () => {
  fresh = await makeFreshDatabase();
  database = openSimulatedDatabase(fresh.appUrl);
});
afterAll(async () => {
  await database.close();
  await fresh.drop();
});

describe('the simulation turns red within ten seeds', () => {
  test.each(Object.entries(mutations).map(([name, mutation], n) => ({ name, n, ...mutation })))(
    'without $name',
    async ({ name, n, bend, breakDatabase }) => {
      breakDatabase?.(database, true);
      try {
        const settings = { stations: 5, operations: 120, ...(bend && { bend }) };
        for (let seed = 1; seed <= 10; seed++) {
          const simulated = await simulate(database, 1000 * (n + 1) + seed, settings);
          const [broken] = await brokenInvariants(simulated);
          for (const station of simulated.stations) await station.forget();
          if (broken === undefined) continue;
          console.log(`without ${name}: seed ${seed} of ten, "${broken}"`);
          return expect(broken).toMatch(/^(once|balance|repush|fold|tray|shown|in time): /);
        }
        throw new Error('Ten seeds, and no invariant was broken.');
      } finally {
        breakDatabase?.(database, false);
      }
    },
    600_000,
  );
});
