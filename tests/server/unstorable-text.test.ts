import { afterAll, beforeAll, expect, test } from 'vitest';
import { inShop } from '#server/db/in-shop.ts';
import { aBatch, closePushStation, db, openPushStation, push, record, shopId } from '#tests/support/push-station.ts';

beforeAll(openPushStation, 120_000);
afterAll(closePushStation);

test.each([
  ['NUL, as a scanner may send it', 'D65\u0000'],
  ['half of a surrogate pair', 'D65\ud83d'],
])(
  'text that PostgreSQL does not hold (%s) wedges nothing: the entry is kept whole, the others go on',
  async (_, text) => {
    const good = record(await aBatch(), 'mixer');
    const batch = await aBatch();
    const bad = record(
      { ...batch, body: { ...batch.body, release: { light: text, byEye: true, at: '2026-12-01T10:00:00Z' } } },
      'mixer',
    );
    const unreadable = { ...record(await aBatch(), 'mixer'), body: { [text]: text } };
    const results = await push([bad, good, unreadable]);
    expect(results.map(({ outcome }) => outcome)).toEqual(['rejected', 'accepted', 'rejected']);
    const kept = await inShop(db, shopId, (trx) =>
      trx
        .selectFrom('quarantine')
        .select('raw')
        .where('shopId', '=', shopId)
        .where('opId', 'in', [bad.opId, unreadable.opId])
        .orderBy('opId')
        .execute(),
    );
    expect(kept.map(({ raw }) => JSON.parse(raw as string) as unknown)).toEqual([bad, unreadable]);
  },
);
