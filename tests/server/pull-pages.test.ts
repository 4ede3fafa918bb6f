import { afterAll, beforeAll, expect, test } from 'vitest';
import { PageStore } from '#server/sync/page-store.ts';
import { pullPage } from '#server/sync/pull-changes.ts';
import type { PullResponse } from '#contract/pull.ts';
import {
  aBatch,
  closePushStation,
  db,
  now,
  openPushStation,
  push,
  record,
  shopId,
} from '#tests/support/push-station.ts';

beforeAll(openPushStation, 120_000);
afterAll(closePushStation);

const store = new PageStore();
const pull = async (cursor: string, limit: number, kept?: PageStore) =>
  JSON.parse(await pullPage(db, shopId, { cursor, limit, installId: undefined, now }, kept)) as PullResponse;

test('a page that is kept for other stations is the page that the database gives, also after every change', async () => {
  let cursor = '';
  for (let n = 0; n < 4; n++) {
    const own = await pull(cursor, 250);
    expect(own.changes.length).toBeGreaterThan(200);
    expect(await pull(cursor, 250, store)).toEqual(own);
    expect(await pull(cursor, 250, store)).toEqual(own);
    const results = await push([record(await aBatch(), 'mixer')]);
    expect(results[0]?.outcome).toBe('accepted');
    expect(await pull(cursor, 250, store)).toEqual(await pull(cursor, 250));
    if (n % 2 === 1) cursor = own.cursor;
  }
});

test('the last page is whole: what was written after the first of two equal questions is in the second', async () => {
  const { cursor } = await pull('', 5000, store);
  const batch = record(await aBatch(), 'mixer');
  await push([batch]);
  const again = await pull('', 5000, store);
  expect(again.cursor).not.toBe(cursor);
  const { batchId } = batch.body as { batchId: string };
  expect(again.changes.map(({ id }) => id)).toContain(batchId);
});
