import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { inShop } from '#server/db/in-shop.ts';
import {
  aBatch,
  actor,
  closePushStation,
  db,
  mg,
  now,
  openPushStation,
  push,
  quarantined,
  record,
  shopId,
} from '#tests/support/push-station.ts';

beforeAll(openPushStation, 120_000);
afterAll(closePushStation);

describe('push', () => {
  test('a mixed batch is stored once with its milligrams, and a second push is a duplicate', async () => {
    const body = await aBatch();
    const operation = record(body, 'mixer');
    const first = await push([operation]);
    expect(first[0]).toMatchObject({ outcome: 'accepted' });
    const again = await push([operation]);
    expect(again[0]).toEqual({ ...first[0], outcome: 'duplicate' });
    const stored = await inShop(db, shopId, async (trx) => ({
      additions: await trx
        .selectFrom('additions')
        .select('actualMg')
        .where('batchId', '=', body.body.batchId)
        .orderBy('n')
        .execute(),
      tub: await trx
        .selectFrom('buckets')
        .select(['balanceMg', 'grade'])
        .where('id', '=', body.body.filled[0]?.bucketId ?? '')
        .executeTakeFirstOrThrow(),
      shares: await trx
        .selectFrom('bucketComposition')
        .select('ppb')
        .where('bucketId', '=', body.body.filled[0]?.bucketId ?? '')
        .execute(),
    }));
    expect(stored.additions.map((row) => row.actualMg)).toEqual(
      body.body.additions.map((addition) => addition.actualMg),
    );
    expect(stored.tub).toEqual({ balanceMg: 500_000, grade: 'untouched' });
    expect(stored.shares.reduce((sum, share) => sum + share.ppb, 0)).toBe(1_000_000_000);
  });

  test('one bad operation among good ones is quarantined, and the others are stored', async () => {
    const [good, other] = [record(await aBatch(), 'mixer'), record(await aBatch(), 'mixer')];
    const bad = { ...record(await aBatch(), 'mixer'), body: { nonsense: true } };
    const results = await push([good, bad, other]);
    expect(results.map((result) => result.outcome)).toEqual(['accepted', 'rejected', 'accepted']);
    expect(await quarantined(bad.opId)).toEqual(['unreadable']);
  });

  test('one that the database refuses is found among the others and quarantined alone', async () => {
    const [good, other, third] = [
      record(await aBatch(), 'mixer'),
      record(await aBatch(), 'mixer'),
      record(await aBatch(), 'mixer'),
    ];
    const body = await aBatch();
    // The batch of another entry: its key is taken, which only the database sees.
    const again = record(
      { ...body, body: { ...body.body, batchId: (good.body as typeof body.body).batchId } },
      'mixer',
    );
    const results = await push([good, again, other, third]);
    expect(results.map((result) => result.outcome)).toEqual(['accepted', 'rejected', 'accepted', 'accepted']);
    expect(await quarantined(again.opId)).toEqual(['not-storable']);
    expect((await push([good, other, third])).map((result) => result.outcome)).toEqual(Array(3).fill('duplicate'));
  });

  test('an entry that comes twice in one push is stored once', async () => {
    const operation = record(await aBatch(), 'mixer');
    const results = await push([operation, operation]);
    expect(results.map((result) => result.outcome)).toEqual(['accepted', 'duplicate']);
  });

  test('the number of another entry is refused and kept', async () => {
    const first = record(await aBatch(), 'mixer');
    await push([first]);
    const [result] = await push([{ ...record(await aBatch(), 'mixer'), opId: first.opId }]);
    expect(result).toMatchObject({ outcome: 'rejected', problem: { code: 'op-id-reused' } });
    expect(await quarantined(first.opId)).toEqual(['op-id-reused']);
  });

  test('a revoked station hands in what it recorded: kept whole, nothing applied, what was stored before stays', async () => {
    const [before, after] = [record(await aBatch(), 'mixer'), record(await aBatch(), 'mixer')];
    await push([before]);
    const results = await push([before, after], true);
    expect(results).toMatchObject([
      { outcome: 'duplicate' },
      { outcome: 'rejected', problem: { code: 'station-revoked' } },
    ]);
    expect(await quarantined(after.opId)).toEqual(['station-revoked']);
    const batchId = (after.body as Awaited<ReturnType<typeof aBatch>>['body']).batchId;
    const stored = await inShop(db, shopId, (trx) =>
      trx.selectFrom('batches').select('id').where('id', '=', batchId).execute(),
    );
    expect(stored).toEqual([]);
  });

  test('an operator may not mix, and the refusal is audited', async () => {
    const [result] = await push([record(await aBatch(), 'operator')]);
    expect(result).toMatchObject({ outcome: 'rejected', problem: { code: 'wrong-role' } });
    const audited = await inShop(db, shopId, (trx) =>
      trx.selectFrom('audit').select('kind').where('kind', '=', 'operation-refused').execute(),
    );
    expect(audited).toHaveLength(1);
  });

  test('what was filled must be what was weighed in', async () => {
    const body = await aBatch();
    body.body.additions.pop();
    expect((await push([record(body, 'mixer')]))[0]).toMatchObject({ outcome: 'rejected', problem: { code: 'sum' } });
  });

  test('a return by gross weight moves the balance by what was used', async () => {
    const body = await aBatch();
    const bucketId = body.body.filled[0]?.bucketId ?? '';
    await push([record(body, 'mixer')]);
    const back = {
      bucketId,
      jobId: null,
      grossMg: mg(268_000),
      tareMg: mg(68_000),
      displayedMg: 500_000,
      deltaMg: -300_000,
      condition: 'clean' as const,
      locationId: null,
    };
    expect((await push([record({ type: 'bucket-returned', body: back }, 'operator')]))[0]).toMatchObject({
      outcome: 'accepted',
    });
    const wrong = { ...back, deltaMg: -1 };
    expect((await push([record({ type: 'bucket-returned', body: wrong }, 'operator')]))[0]).toMatchObject({
      problem: { code: 'sum' },
    });
    const tub = await inShop(db, shopId, (trx) =>
      trx.selectFrom('buckets').select(['balanceMg', 'grade']).where('id', '=', bucketId).executeTakeFirstOrThrow(),
    );
    expect(tub).toEqual({ balanceMg: 200_000, grade: 'returned' });
  });

  test('more taken from a tub than it held is accepted and flagged for a new weight', async () => {
    const source = await aBatch();
    const bucketId = source.body.filled[0]?.bucketId ?? '';
    await push([record(source, 'mixer')]);
    const body = await aBatch();
    const taken = {
      kind: 'bucket' as const,
      bucketId,
      scaleId: null,
      plannedMg: mg(500_000),
      actualMg: mg(600_000),
      empties: false,
      at: now.toISOString(),
      actorId: actor('mixer').personId,
    };
    body.body.additions = [taken];
    Object.assign(body.body.filled[0] ?? {}, { massMg: 600_000 });
    expect((await push([record(body, 'mixer')]))[0]).toMatchObject({ outcome: 'accepted' });
    const tub = await inShop(db, shopId, (trx) =>
      trx
        .selectFrom('buckets')
        .select(['balanceMg', 'needsRecount'])
        .where('id', '=', bucketId)
        .executeTakeFirstOrThrow(),
    );
    expect(tub).toEqual({ balanceMg: -100_000, needsRecount: true });
  });
});
