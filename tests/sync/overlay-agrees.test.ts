import { v7 as uuidv7 } from 'uuid';
import { afterAll, beforeAll, expect, test } from 'vitest';
import type { OperationBody } from '#contract/operation-bodies.ts';
import type { Row } from '#contract/rows.ts';
import type { Milligrams } from '#domain/mass.ts';
import { recordOperation, takeBucketCode } from '#offline/record-operation.ts';
import { readBatches, readRows, readShelf } from '#offline/shown.ts';
import { syncOnce } from '#offline/sync-once.ts';
import { type BodyOf, batchMixed, fresh, fromTub, relocated, returned } from '#tests/support/operations.ts';
import { openDemoStation } from './demo-station.ts';

let demo: Awaited<ReturnType<typeof openDemoStation>>;
const sync = () => syncOnce(demo.station, demo.deps, () => {});

beforeAll(async () => {
  demo = await openDemoStation();
}, 120_000);
afterAll(async () => demo?.close());

const mg = (value: number) => value as Milligrams;
type Tub = Pick<Row<'buckets'>, 'id' | 'tareMg' | 'balanceMg'>;

/** Weighed back with so much in it. */
function backWith(tub: Tub, leftMg: number, given: Partial<BodyOf<'bucket-returned'>['body']> = {}): OperationBody {
  const weighed = { grossMg: mg(tub.tareMg + leftMg), tareMg: mg(tub.tareMg) };
  return returned(tub.id, { ...weighed, displayedMg: tub.balanceMg, deltaMg: leftMg - tub.balanceMg, ...given });
}

/** A batch of the demo shop: a known formula, container and code; lots where fresh ink went in. */
async function demoBatch(additions: Parameters<typeof batchMixed>[0]) {
  const { station } = demo;
  const [formula] = await readRows(station, 'formulas');
  const [container] = await readRows(station, 'containers');
  const mixed = batchMixed(additions.map((addition) => ({ ...addition, actorId: station.person.id })));
  mixed.body.formulaId = formula?.id as string;
  mixed.body.revision = formula?.revisions[0]?.revision as number;
  for (const tub of mixed.body.filled)
    Object.assign(tub, { containerId: container?.id, code: await takeBucketCode(station) });
  const [filled] = mixed.body.filled;
  return { mixed, tub: { id: filled?.bucketId, tareMg: filled?.tareMg, balanceMg: filled?.massMg } as Tub };
}

/** A shift with every kind of entry, on leftovers of the demo shop. */
async function aShift(): Promise<OperationBody[]> {
  const { station } = demo;
  const shelf = (await readShelf(station)).filter((tub) => tub.state === 'shelf' && tub.balanceMg > 100_000);
  const [used, part, dirty, scraped, moved, thrown] = shelf.filter(
    (tub) => tub.composition.length > 1,
  ) as Required<Tub>[] as [Tub, Tub, Tub, Tub, Tub, Tub];
  const unknown = shelf.find((tub) => tub.composition.length === 0) as Tub;
  const lots = await readRows(station, 'lots');
  const [job] = await readRows(station, 'jobs');
  const [place] = await readRows(station, 'locations');
  const [family] = await readRows(station, 'families');
  const [container] = await readRows(station, 'containers');
  const lotted = (n: number, mass: number) => ({
    ...fresh(lots[n]?.componentId as string, mass),
    lotId: lots[n]?.id as string,
  });
  const release = { light: 'D50 booth', byEye: true, at: new Date().toISOString() };

  const first = await demoBatch([
    fromTub(used.id, used.balanceMg - 700, true),
    fromTub(part.id, 33_300),
    fromTub(part.id, 11_100),
    lotted(0, 412_300),
    lotted(3, 51_100),
  ]);
  first.mixed.body.release = release;
  first.mixed.body.jobId = job?.id as string;
  const murky = await demoBatch([lotted(1, 300_000), fromTub(unknown.id, 20_000)]);
  const again = await demoBatch([fromTub(first.tub.id, 100_000), lotted(2, 100_000)]);
  return [
    first.mixed,
    murky.mixed,
    again.mixed,
    { type: 'bucket-issued', body: { bucketId: first.tub.id, jobId: job?.id as string, overrideReason: null } },
    { type: 'bucket-issued', body: { bucketId: murky.tub.id, jobId: null, overrideReason: 'Rush' } },
    backWith({ ...first.tub, balanceMg: first.tub.balanceMg - 100_000 }, 77_700, { condition: 'lint' }),
    { type: 'batch-released', body: { batchId: murky.mixed.body.batchId, release } },
    backWith(dirty, 20_000, { condition: 'dirty', jobId: job?.id as string }),
    backWith(scraped, 0),
    relocated(moved.id, place?.id as string),
    {
      type: 'bucket-recounted',
      body: {
        bucketId: moved.id,
        grossMg: mg(moved.tareMg + 12_300),
        tareMg: mg(moved.tareMg),
        displayedMg: moved.balanceMg,
        deltaMg: 12_300 - moved.balanceMg,
      },
    },
    {
      type: 'bucket-discarded',
      body: { bucketId: thrown.id, displayedMg: thrown.balanceMg, reason: 'Skinned over', note: null },
    },
    // More than the tub holds: flagged on both sides.
    (await demoBatch([fromTub(moved.id, 50_000), lotted(4, 1_000)])).mixed,
    {
      type: 'bucket-adopted',
      body: {
        bucketId: uuidv7(),
        code: await takeBucketCode(station),
        name: 'Old navy',
        familyId: family?.id as string,
        containerId: container?.id as string,
        grossMg: mg(500_000),
        tareMg: mg(60_000),
        locationId: null,
        composition: [{ componentId: lots[0]?.componentId as string, ppb: 1_000_000_000 }],
        lab: { l: 20, a: 1, b: -12 },
      },
    },
  ];
}

/** Rows by id; the server writes the same instants in another form. */
function comparable<T extends Row<'buckets'> | Row<'batches'>>(rows: readonly T[]): Map<string, T> {
  const iso = (text: string) => new Date(text).toISOString();
  const plain = rows.map((row) =>
    'filledAt' in row ? { ...row, filledAt: iso(row.filledAt) } : { ...row, mixedAt: iso(row.mixedAt) },
  );
  return new Map(plain.map((row) => [row.id, row as T]));
}

test('what a station shows before it has sent is what the server has afterwards, field by field', async () => {
  const { station } = demo;
  expect(await sync()).toEqual({ kind: 'done' });
  const shift = await aShift();
  expect(new Set(shift.map(({ type }) => type)).size).toBe(8);
  for (const body of shift) await recordOperation(station, body);
  const tubs = comparable(await readShelf(station));
  const batches = comparable(await readBatches(station));
  expect(tubs).not.toEqual(comparable(await readRows(station, 'buckets')));

  expect(await sync()).toEqual({ kind: 'done' });
  const refused = (await station.outbox.ops.toArray()).filter(({ status }) => status !== 'sent');
  expect(refused.map(({ operation, problem }) => [operation.type, problem?.detail])).toEqual([]);
  expect(comparable(await readRows(station, 'buckets'))).toEqual(tubs);
  expect(comparable(await readRows(station, 'batches'))).toEqual(batches);
  expect(comparable(await readShelf(station))).toEqual(tubs);
});
