import pg from 'pg';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { isPassing } from '#server/db/passing-error.ts';
import {
  aBatch,
  closePushStation,
  databaseUrl,
  openPushStation,
  push,
  quarantined,
  record,
  shopId,
} from '#tests/support/push-station.ts';

beforeAll(openPushStation, 120_000);
afterAll(closePushStation);

test("a push that does not get the shop's lock decides nothing, and the next one takes it", async () => {
  const operation = record(await aBatch(), 'mixer');
  const other = new pg.Client({ connectionString: databaseUrl() });
  await other.connect();
  await other.query('begin');
  await other.query(`select set_config('app.shop_id', $1, true)`, [shopId]);
  await other.query('update shop_sync set seq = seq where shop_id = $1', [shopId]);
  const failed = await push([operation]).catch((error: unknown) => error);
  expect(isPassing(failed)).toBe(true);
  await other.query('rollback');
  await other.end();
  expect(await quarantined(operation.opId)).toEqual([]);
  expect(await push([operation])).toMatchObject([{ outcome: 'accepted' }]);
});
