import { afterAll, beforeAll, expect, test } from 'vitest';
import { makeFreshDatabase } from '#tests/support/fresh-database.ts';
import { failedSeeds } from './failed-seeds.ts';
import { brokenInvariants } from './invariants.ts';
import { simulate } from './simulate.ts';
import { type SimulatedDatabase, openSimulatedDatabase } from './simulated-database.ts';
import { SimulationTotal } from './simulation-total.ts';

const SEEDS = Number(process.env['SIMULATION_SEEDS'] ?? 60);
const FIRST = Number(process.env['SIMULATION_FIRST'] ?? 1);
const settings = { stations: 5, operations: 200 };

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

test(
  `of ${SEEDS} shifts over a bad network with killed tabs nothing is lost and nothing doubled`,
  async () => {
    const total = new SimulationTotal();
    for (const seed of new Set([...failedSeeds, ...Array.from({ length: SEEDS }, (_, n) => FIRST + n)])) {
      const simulated = await simulate(database, seed, settings);
      total.add(seed, simulated, await brokenInvariants(simulated));
      for (const station of simulated.stations) await station.forget();
    }
    console.log(total.summary());
    expect(total.broken).toEqual([]);
    expect(total.operations).toBeGreaterThan(SEEDS * 100);
    expect(total.kills).toBeGreaterThan(SEEDS);
    expect(Object.entries(total.faults).filter(([, times]) => times === 0)).toEqual([]);
  },
  Math.max(1_200_000, SEEDS * 120_000),
);

test('a seed gives the same shift every time', async () => {
  const traces: string[] = [];
  for (const url of [fresh.appUrl, (await makeAnother()).appUrl]) {
    const other = openSimulatedDatabase(url);
    const simulated = await simulate(other, 4242, { stations: 5, operations: 120 });
    traces.push(simulated.trace);
    for (const station of simulated.stations) await station.forget();
    await other.close();
  }
  expect(traces[0]).toBe(traces[1]);
});

let another: Awaited<ReturnType<typeof makeFreshDatabase>> | undefined;
async function makeAnother() {
  another = await makeFreshDatabase();
  return another;
}
afterAll(async () => another?.drop());
