import type { OperationBody } from '#contract/operation-bodies.ts';
import type { Row } from '#contract/rows.ts';
import { RecordError } from '#offline/record-error.ts';
import { takeBucketCode } from '#offline/record-operation.ts';
import { readShelf } from '#offline/shown.ts';
import type { Random } from '#scripts/seed/random.ts';
import { batchMixed, fresh, fromTub, relocated, returned } from '#tests/support/operations.ts';
import { mg } from './simulated-shop.ts';
import type { SimulatedStation } from './simulated-station.ts';

type Tub = Row<'buckets'>;

/** A batch of so much, in a labelled tub of its own; every id from the seed. */
export async function mixOn(
  station: SimulatedStation,
  ...additions: Parameters<typeof batchMixed>[0]
): Promise<ReturnType<typeof batchMixed>> {
  const { open, deps } = station.requireTab();
  const { formulaId, containerId } = station.given.shop;
  const mixed = batchMixed(additions.map((addition) => ({ ...addition, actorId: open.person.id })));
  Object.assign(mixed.body, { batchId: deps.randomId(), formulaId });
  for (const tub of mixed.body.filled)
    Object.assign(tub, { bucketId: deps.randomId(), containerId, code: await takeBucketCode(open) });
  return mixed;
}

export const freshOn = (station: SimulatedStation, grams: number) =>
  fresh(station.given.shop.componentIds[0], 1000 * grams);

/** What a technician could do with a tub as this station shows it; undefined: there is no such tub here yet. */
export async function anyEntry(
  station: SimulatedStation,
  hot: readonly string[],
  random: Random,
): Promise<OperationBody | undefined> {
  const id = random.pick(hot);
  const tub = (await readShelf(station.requireTab().open)).find((shown) => shown.id === id);
  if (tub === undefined) return undefined;
  const { locationIds } = station.given.shop;
  const kind = random.pick(['place', 'count', 'use', 'use', 'use', 'out', 'back', 'nowhere'] as const);
  if (kind === 'place') return relocated(id, random.pick(locationIds));
  // A place that no shop has: the server refuses it, and it must be found again in tray and quarantine.
  if (kind === 'nowhere' && random.next() < 0.3) return relocated(id, station.given.shop.formulaId);
  if (kind === 'count') return counted(tub, random);
  if (kind === 'out') return { type: 'bucket-issued', body: { bucketId: id, jobId: null, overrideReason: 'Rush' } };
  if (kind === 'back') return back(tub, random);
  return mixOn(station, fromTub(id, 1000 * random.int(1, 60)), freshOn(station, random.int(1, 40)));
}

function counted(tub: Tub, random: Random): OperationBody {
  const net = 1000 * random.int(1, 900);
  const weighed = { grossMg: mg(tub.tareMg + net), tareMg: mg(tub.tareMg) };
  const deltaMg = net - tub.balanceMg;
  return {
    type: 'bucket-recounted',
    body: { bucketId: tub.id, ...weighed, displayedMg: tub.balanceMg, deltaMg },
  };
}

function back(tub: Tub, random: Random): OperationBody {
  const net = 1000 * random.int(1, 400);
  const weighed = { grossMg: mg(tub.tareMg + net), tareMg: mg(tub.tareMg) };
  return returned(tub.id, { ...weighed, displayedMg: tub.balanceMg, deltaMg: net - tub.balanceMg });
}

/** True when the device said that it could not keep the entry: nothing was shown as saved. */
export function wasToldUnsaved(error: unknown): boolean {
  const names = [String((error as Error).name), String((error as { inner?: Error }).inner?.name)];
  return error instanceof RecordError || names.some((name) => /Quota|Abort/.test(name));
}
