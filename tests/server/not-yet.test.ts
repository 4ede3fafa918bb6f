import { v7 as uuid } from 'uuid';
import { afterAll, beforeAll, expect, test } from 'vitest';
import type { OperationBody } from '#contract/operation-bodies.ts';
import { inShop } from '#server/db/in-shop.ts';
import {
  aBatch,
  closePushStation,
  db,
  mg,
  openPushStation,
  push,
  quarantined,
  record,
  shopId,
} from '#tests/support/push-station.ts';

beforeAll(openPushStation, 120_000);
afterAll(closePushStation);

const tubOf = (body: Awaited<ReturnType<typeof aBatch>>) => body.body.filled[0]?.bucketId ?? '';
const issue = (bucketId: string): OperationBody => ({
  type: 'bucket-issued',
  body: { bucketId, jobId: null, overrideReason: null },
});
const seenBy = (bucketId: string, seen: Record<string, number>) => ({
  ...record(issue(bucketId), 'operator'),
  seen: { [bucketId]: seen },
});
const findTub = (id: string) =>
  inShop(db, shopId, (trx) =>
    trx.selectFrom('buckets').select(['state', 'needsRecount']).where('id', '=', id).executeTakeFirst(),
  );

test('an entry on a tub that its station has seen and the server has not is sent again, and taken once the tub is there', async () => {
  const filling = record(await aBatch(), 'mixer');
  const bucketId = tubOf(filling as never);
  const early = seenBy(bucketId, { [filling.installId]: filling.deviceSeq });
  expect(await push([early])).toEqual([{ opId: early.opId, outcome: 'retry' }]);
  expect(await quarantined(early.opId)).toEqual([]);
  expect((await push([filling, early])).map(({ outcome }) => outcome)).toEqual(['accepted', 'accepted']);
  expect(await findTub(bucketId)).toEqual({ state: 'at-press', needsRecount: false });
});

test('a tub that nobody has seen does not exist: refused', async () => {
  const [result] = await push([record(issue(uuid()), 'operator')]);
  expect(result).toMatchObject({ outcome: 'rejected', problem: { code: 'no-such-tub' } });
});

test.each(['in the same push', 'in an earlier push'])(
  'a tub whose filling was refused %s does not come: refused',
  async (when) => {
    const body = await aBatch();
    body.body.additions.pop();
    const filling = record(body, 'mixer');
    const after = seenBy(tubOf(body), { [filling.installId]: filling.deviceSeq });
    const release = record(
      {
        type: 'batch-released',
        body: { batchId: body.body.batchId, release: { light: 'D65', byEye: true, at: filling.deviceTime } },
      },
      'mixer',
    );
    if (when === 'in an earlier push') await push([filling]);
    const results = await push(when === 'in the same push' ? [filling, after, release] : [after, release]);
    expect(results.slice(-2)).toMatchObject([
      { outcome: 'rejected', problem: { code: 'tub-refused' } },
      { outcome: 'rejected', problem: { code: 'batch-refused' } },
    ]);
  },
);

test('a release that comes before its batch is sent again, and so is the issue by whoever has seen that release', async () => {
  const other = uuid();
  const body = await aBatch();
  body.body.release = null;
  const bucketId = tubOf(body);
  const release = record(
    {
      type: 'batch-released',
      body: { batchId: body.body.batchId, release: { light: 'D65', byEye: true, at: new Date().toISOString() } },
    },
    'mixer',
  );
  expect(await push([release])).toMatchObject([{ outcome: 'retry' }]);
  await push([record(body, 'mixer')]);
  const issued = seenBy(bucketId, { [other]: 7 });
  expect(await push([issued])).toMatchObject([{ outcome: 'retry' }]);
  const unseen = seenBy(bucketId, {});
  expect(await push([unseen])).toMatchObject([{ outcome: 'rejected', problem: { code: 'not-released' } }]);
  expect((await push([release, issued])).map(({ outcome }) => outcome)).toEqual(['accepted', 'accepted']);
});

test.each(['in the same push', 'in an earlier push'])(
  'a release that was refused %s does not come: the issue is refused',
  async (when) => {
    const body = await aBatch();
    body.body.release = null;
    const filling = record(body, 'mixer');
    await push([filling]);
    const release = record(
      {
        type: 'batch-released',
        body: { batchId: body.body.batchId, release: { light: 'D65', byEye: true, at: new Date().toISOString() } },
      },
      'operator',
    );
    const issued = seenBy(tubOf(body), { [filling.installId]: filling.deviceSeq });
    expect(await push([issued])).toMatchObject([{ outcome: 'retry' }]);
    if (when === 'in an earlier push') await push([release]);
    const results = await push(when === 'in the same push' ? [release, issued] : [issued]);
    expect(results.at(-1)).toMatchObject({ outcome: 'rejected', problem: { code: 'not-released' } });
  },
);

test('a scraped tub loses what was shown of it: what another station used meanwhile is flagged, and movements add up', async () => {
  const source = await aBatch();
  const bucketId = tubOf(source);
  const filling = record(source, 'mixer');
  await push([filling]);
  const used = {
    bucketId,
    jobId: null,
    grossMg: mg(368_000),
    tareMg: mg(68_000),
    displayedMg: 500_000,
    deltaMg: -200_000,
  };
  const returned = record(
    { type: 'bucket-returned', body: { ...used, condition: 'clean', locationId: null } },
    'operator',
  );
  await push([{ ...returned, installId: filling.installId, seen: {} }]);
  const body = await aBatch();
  body.body.additions = [
    {
      kind: 'bucket',
      bucketId,
      scaleId: null,
      plannedMg: mg(500_000),
      actualMg: mg(490_000),
      empties: true,
      displayed: { balanceMg: 500_000, grade: 'untouched', generation: 0 },
      at: filling.deviceTime,
      actorId: filling.actorId,
    },
  ];
  Object.assign(body.body.filled[0] ?? {}, { massMg: 490_000 });
  expect(await push([record(body, 'mixer')])).toMatchObject([{ outcome: 'accepted' }]);
  const { balance, sum, grade } = await inShop(db, shopId, async (trx) => ({
    balance: await trx
      .selectFrom('buckets')
      .select(['balanceMg', 'needsRecount'])
      .where('id', '=', bucketId)
      .executeTakeFirst(),
    sum: await trx
      .selectFrom('movements')
      .select((eb) => eb.fn.sum<number>('deltaMg').as('sum'))
      .where('bucketId', '=', bucketId)
      .executeTakeFirstOrThrow(),
    grade: await trx
      .selectFrom('buckets')
      .select(['grade', 'generation'])
      .where('id', '=', tubOf(body))
      .executeTakeFirst(),
  }));
  expect(balance).toEqual({ balanceMg: -200_000, needsRecount: true });
  expect(Number(sum.sum)).toBe(-200_000);
  expect(grade).toEqual({ grade: 'untouched', generation: 0 });
});
