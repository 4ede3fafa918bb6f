import 'fake-indexeddb/auto';
import { v7 as uuid } from 'uuid';
import { afterAll, expect, inject, test } from 'vitest';
import { enrolStations } from '#scripts/bench/sync-stations.ts';
import { pushOutbox } from '#offline/push-outbox.ts';
import { recordOperation } from '#offline/record-operation.ts';
import { readQueue } from '#offline/shown.ts';
import { openDatabase } from '#server/db/connection.ts';
import { MOST_PUSHES_A_MINUTE } from '#server/http/push-limits.ts';
import { findShop } from '#tests/support/find-shop.ts';
import { relocated } from '#tests/support/operations.ts';
import { makeStation } from '#tests/support/station.ts';

const db = openDatabase(inject('appUrl'), 1);
afterAll(() => db.destroy());

test('a station that pushes without a pause is asked to wait, waits as long with its queue kept, and others go on', async () => {
  const [busy, other] = await enrolStations(db, await findShop(db, 'mixer@gorsegate.example.test'), 2);
  const baseUrl = inject('baseUrl');
  const as = (cookie: string | undefined) =>
    ((path: string, init?: RequestInit) => {
      const headers = { 'content-type': 'application/json', origin: baseUrl, cookie: `station=${cookie}` };
      return fetch(baseUrl + path, { ...init, headers });
    }) as typeof fetch;
  const push = (cookie: string | undefined) => as(cookie)('/api/sync/push', { method: 'POST', body: '{}' });
  const before: number[] = [];
  for (let n = 0; n < MOST_PUSHES_A_MINUTE; n++) before.push((await push(busy?.cookie)).status);
  expect(new Set(before)).toEqual(new Set([422]));

  const refused = await push(busy?.cookie);
  expect(refused.status).toBe(429);
  const station = await makeStation();
  await recordOperation(station, relocated(uuid()));
  const result = await pushOutbox(station, { fetch: as(busy?.cookie), now: () => new Date(), randomId: uuid });
  expect(result).toMatchObject({ kind: 'failed', problem: 'The server is busy. It tries again.' });
  const { retryAfterMs } = result as { retryAfterMs: number };
  expect(retryAfterMs).toBeGreaterThan(0);
  expect(retryAfterMs).toBeLessThanOrEqual(Number(refused.headers.get('Retry-After')) * 1000);
  expect((await readQueue(station)).waiting).toHaveLength(1);
  expect((await push(other?.cookie)).status).toBe(422);
});
