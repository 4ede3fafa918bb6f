import { v7 as uuidv7 } from 'uuid';
import type { OperationBody } from '#contract/operation-bodies.ts';
import type { Row } from '#contract/rows.ts';
import type { Milligrams } from '#domain/mass.ts';
import { takeBucketCode } from '#offline/record-operation.ts';
import { readRows, readShelf } from '#offline/shown.ts';
import type { Station } from '#offline/station.ts';
import type { Random } from '#scripts/seed/random.ts';
import { batchMixed, fresh, fromTub, relocated, returned } from '#tests/support/operations.ts';

const mg = (value: number) => value as Milligrams;
type Tub = Pick<Row<'buckets'>, 'id' | 'tareMg' | 'balanceMg'>;

/** A technician with a pocket book: what each tub holds is reckoned beside the product, from what the scale would say. */
export interface Technician {
  next: (random: Random) => Promise<OperationBody>;
  /** So many additions that five of them fill a push. */
  nextLarge: () => Promise<OperationBody>;
  /** What the server refuses: a place that no shop has. */
  nextRefused: (random: Random) => OperationBody;
  /** Balance by tub, of all tubs that were touched. */
  book: ReadonlyMap<string, number>;
}

export async function openPocketBook(station: Station): Promise<Technician> {
  const [[formula], [container], lots, places] = await Promise.all([
    readRows(station, 'formulas'),
    readRows(station, 'containers'),
    readRows(station, 'lots'),
    readRows(station, 'locations'),
  ]);
  const shelf = (await readShelf(station)).filter(({ state, grade }) => state === 'shelf' && grade === 'untouched');
  const tubs: Tub[] = shelf.slice(0, 40).map(({ id, tareMg, balanceMg }) => ({ id, tareMg, balanceMg }));
  const book = new Map<string, number>();
  const weigh = (tub: Tub, netMg: number) => {
    const weighed = { grossMg: mg(tub.tareMg + netMg), tareMg: mg(tub.tareMg), displayedMg: tub.balanceMg };
    const deltaMg = netMg - tub.balanceMg;
    set(tub, netMg);
    return { ...weighed, deltaMg };
  };
  const set = (tub: Tub, netMg: number) => {
    tub.balanceMg = netMg;
    book.set(tub.id, netMg);
  };
  const freshInk = (n: number, mass: number) => {
    const lot = lots[n % lots.length];
    return { ...fresh(lot?.componentId as string, mass), lotId: lot?.id as string };
  };

  async function mix(additions: Parameters<typeof batchMixed>[0]): Promise<OperationBody> {
    const mixed = batchMixed(additions.map((addition) => ({ ...addition, actorId: station.person.id })));
    Object.assign(mixed.body, { formulaId: formula?.id, revision: formula?.revisions[0]?.revision });
    for (const tub of mixed.body.filled) {
      Object.assign(tub, { containerId: container?.id, code: await takeBucketCode(station) });
      tubs.push({ id: tub.bucketId, tareMg: tub.tareMg, balanceMg: tub.massMg });
      book.set(tub.bucketId, tub.massMg);
    }
    return mixed;
  }

  async function useUp(random: Random): Promise<OperationBody> {
    const tub = random.pick(tubs);
    const mass = Math.min(1000 * random.int(1, 80), Math.max(1000, tub.balanceMg));
    set(tub, tub.balanceMg - mass);
    return mix([fromTub(tub.id, mass), freshInk(random.int(0, 99), 1000 * random.int(50, 800))]);
  }

  async function next(random: Random): Promise<OperationBody> {
    const tub = random.pick(tubs);
    const kind = random.pick(['use', 'use', 'out', 'back', 'place', 'count', 'discard'] as const);
    if (kind === 'use') return useUp(random);
    if (kind === 'out')
      return { type: 'bucket-issued', body: { bucketId: tub.id, jobId: null, overrideReason: 'Rush' } };
    if (kind === 'back') return returned(tub.id, weigh(tub, 1000 * random.int(1, 500)));
    if (kind === 'place') return relocated(tub.id, random.pick(places).id);
    if (kind === 'count')
      return { type: 'bucket-recounted', body: { bucketId: tub.id, ...weigh(tub, 1000 * random.int(1, 500)) } };
    tubs.splice(tubs.indexOf(tub), 1);
    const body = { bucketId: tub.id, displayedMg: tub.balanceMg, reason: 'Dried or gelled', note: null };
    book.set(tub.id, 0);
    return { type: 'bucket-discarded', body };
  }

  return {
    next,
    nextLarge: () => mix(Array.from({ length: 100 }, (_, n) => freshInk(n, 5_000))),
    nextRefused: (random) => relocated(random.pick(tubs).id, uuidv7()),
    book,
  };
}
