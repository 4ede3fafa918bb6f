import { afterAll, beforeAll, expect, test } from 'vitest';
import { findStation } from '#server/auth/stations.ts';
import { inShop } from '#server/db/in-shop.ts';
import { enrolStations } from '#scripts/bench/sync-stations.ts';
import { closePushStation, db, openPushStation, shopId } from '#tests/support/push-station.ts';

beforeAll(openPushStation, 120_000);
afterAll(closePushStation);

const DAY = 86_400_000;

test('a revoked station may hand in for thirty days, and is known as revoked', async () => {
  const [station] = await enrolStations(db, shopId, 1);
  const now = new Date();
  const found = await findStation(db, station?.cookie, now);
  expect(found).toMatchObject({ revoked: false, mayHandIn: true });
  await inShop(db, shopId, (trx) =>
    trx
      .updateTable('stations')
      .set({ revokedAt: now })
      .where('shopId', '=', shopId)
      .where('id', '=', found?.stationId ?? '')
      .execute(),
  );
  const later = (days: number) => findStation(db, station?.cookie, new Date(now.getTime() + days * DAY));
  expect(await later(29)).toMatchObject({ revoked: true, mayHandIn: true });
  expect(await later(31)).toMatchObject({ revoked: true, mayHandIn: false });
});
