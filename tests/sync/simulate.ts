import { v7 as uuidv7 } from 'uuid';
import type { OperationBody } from '#contract/operation-bodies.ts';
import type { Row } from '#contract/rows.ts';
import type { Milligrams } from '#domain/mass.ts';
import { recordOperation, takeBucketCode } from '#offline/record-operation.ts';
import { readRows, readShelf } from '#offline/shown.ts';
import { syncOnce } from '#offline/sync-once.ts';
import { type Random, seededRandom } from '#scripts/seed/random.ts';
import { batchMixed, fresh, fromTub, relocated, returned } from '#tests/support/operations.ts';
import { EVERY_FAULT, NO_FAULT, faultyNetwork } from './faulty-network.ts';
import { type SimulatedShop, type SimulatedStation, killTab } from './simulated-shop.ts';

export interface Simulated {
  stations: readonly SimulatedStation[];
  /** Each operation that a station said was saved, and which station it was. */
  saved: ReadonlyMap<string, SimulatedStation>;
  kills: number;
}

export interface Settings {
  stations: number;
  operations: number;
  /** Bends what the handlers do: the mutation check breaks them on purpose. */
  bend?: (server: typeof fetch) => typeof fetch;
}

const mg = (value: number) => value as Milligrams;
type Tub = Row<'buckets'>;

/** Stations that record on the same few tubs, send and fetch over a bad network, and are killed; then it is quiet. */
export async function simulate(shop: SimulatedShop, seed: number, settings: Settings): Promise<Simulated> {
  const random = seededRandom(seed);
  const stations: SimulatedStation[] = [];
  for (let n = 0; n < settings.stations; n++) stations.push(await shop.enrol());
  const bend = settings.bend ?? ((server: typeof fetch) => server);
  const saved = new Map<string, SimulatedStation>();
  const sync = (station: SimulatedStation, faults = EVERY_FAULT) => {
    const fetch = faultyNetwork(bend(station.handlers), random, faults);
    return syncOnce(station.open, { fetch, now: () => new Date(), randomId: uuidv7 }, () => {}, station.browser).catch(
      () => undefined,
    );
  };
  for (const station of stations) await sync(station, NO_FAULT);
  const hot = await makeHotTubs(stations[0] as SimulatedStation, saved);
  for (const station of stations) await sync(station, NO_FAULT);

  let kills = 0;
  for (let n = 0; n < settings.operations; n++) {
    const station = random.pick(stations);
    const body = await anyEntry(station, hot, random);
    if (body !== undefined) {
      const { opId } = await recordOperation(station.open, body);
      saved.set(opId, station);
    }
    if (random.next() < 0.3) await Promise.all(stations.filter(() => random.next() < 0.5).map((one) => sync(one)));
    if (random.next() < 0.04) {
      kills += 1;
      const cut = sync(station);
      await killTab(station);
      await cut;
    }
  }
  for (let round = 0; round < 4; round++) for (const station of stations) await sync(station, NO_FAULT);
  return { stations, saved, kills };
}

async function makeHotTubs(station: SimulatedStation, saved: Map<string, SimulatedStation>): Promise<string[]> {
  const hot: string[] = [];
  for (let n = 0; n < 2; n++) {
    const [component] = await readRows(station.open, 'components');
    const body = await aBatch(station, [fresh(component?.id ?? '', 900_000)]);
    const { opId } = await recordOperation(station.open, body);
    saved.set(opId, station);
    hot.push(body.body.filled[0]?.bucketId ?? '');
  }
  return hot;
}

async function aBatch({ open }: SimulatedStation, additions: Parameters<typeof batchMixed>[0]) {
  const [formula] = await readRows(open, 'formulas');
  const [container] = await readRows(open, 'containers');
  const mixed = batchMixed(additions.map((addition) => ({ ...addition, actorId: open.person.id })));
  Object.assign(mixed.body, { formulaId: formula?.id, revision: formula?.revisions[0]?.revision });
  for (const tub of mixed.body.filled)
    Object.assign(tub, { containerId: container?.id, code: await takeBucketCode(open) });
  return mixed;
}

/** What a technician could do with a tub as this station shows it. */
async function anyEntry(
  station: SimulatedStation,
  hot: readonly string[],
  random: Random,
): Promise<OperationBody | undefined> {
  const id = random.pick(hot);
  const tub = (await readShelf(station.open)).find((shown) => shown.id === id);
  if (tub === undefined) return undefined;
  const places = await readRows(station.open, 'locations');
  const kind = random.pick(['place', 'count', 'use', 'use', 'out', 'back'] as const);
  if (kind === 'place') return relocated(id, random.pick(places).id);
  if (kind === 'count') return counted(tub, random);
  if (kind === 'out') return { type: 'bucket-issued', body: { bucketId: id, jobId: null, overrideReason: 'Rush' } };
  if (kind === 'back') return back(tub, random);
  return aBatch(station, [fromTub(id, 1000 * random.int(1, 60))]);
}

function counted(tub: Tub, random: Random): OperationBody {
  const net = 1000 * random.int(1, 900);
  const grossMg = mg(tub.tareMg + net);
  const deltaMg = net - tub.balanceMg;
  return {
    type: 'bucket-recounted',
    body: { bucketId: tub.id, grossMg, tareMg: mg(tub.tareMg), displayedMg: tub.balanceMg, deltaMg },
  };
}

function back(tub: Tub, random: Random): OperationBody {
  const net = 1000 * random.int(1, 400);
  const weighed = { grossMg: mg(tub.tareMg + net), tareMg: mg(tub.tareMg) };
  return returned(tub.id, { ...weighed, displayedMg: tub.balanceMg, deltaMg: net - tub.balanceMg });
}
