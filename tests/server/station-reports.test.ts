import { v7 as uuid } from 'uuid';
import { afterAll, beforeAll, expect, test, vi } from 'vitest';
import type { SignInRequest } from '#contract/sign-in.ts';
import { findStation, type KnownStation } from '#server/auth/stations.ts';
import { signIn } from '#server/auth/sign-in.ts';
import { inShop } from '#server/db/in-shop.ts';
import { applyPush } from '#server/sync/apply-push.ts';
import { keepReport } from '#server/sync/keep-report.ts';
import { demoSignIns } from '#scripts/demo-sign-ins.mjs';
import { makeGrantKeys } from '#scripts/grant-keys.mjs';
import { closePushStation, databaseUrl, db, openPushStation, record, shopId } from '#tests/support/push-station.ts';

beforeAll(async () => {
  await openPushStation();
  vi.stubEnv('DATABASE_URL', databaseUrl());
  vi.stubEnv('GRANT_KEYS', makeGrantKeys());
}, 120_000);
afterAll(closePushStation);

const at = new Date('2026-12-01T10:00:00Z');
const MINUTE = 60_000;
const deps = (minutes = 0) => ({ now: () => new Date(at.getTime() + minutes * MINUTE), randomId: uuid });
const account = demoSignIns.find(({ role }) => role === 'mixer');

async function signInWith(installIds: string[], known?: KnownStation) {
  const request: SignInRequest = {
    email: account?.email ?? '',
    password: account?.password ?? '',
    installIds,
    newInstallId: uuid(),
  };
  const { response, stationCookie } = await signIn(db, request, known, deps());
  const station = known ?? (await findStation(db, stationCookie, at));
  if (station === undefined) throw new Error('The sign-in made no station.');
  return { response, station, installId: response.install.id };
}

async function audited(kind: string, installId: string): Promise<Record<string, unknown>[]> {
  const rows = await inShop(db, shopId, (trx) =>
    trx.selectFrom('audit').select('detail').where('shopId', '=', shopId).where('kind', '=', kind).execute(),
  );
  return rows
    .map(({ detail }) => detail as Record<string, unknown>)
    .filter((detail) => detail['installId'] === installId);
}

const installRow = (id: string) =>
  inShop(db, shopId, (trx) =>
    trx.selectFrom('installs').selectAll().where('shopId', '=', shopId).where('id', '=', id).executeTakeFirstOrThrow(),
  );

/** Entries of these numbers; of an unknown place they are refused. */
async function pushNumbers(
  { station, installId, response }: Awaited<ReturnType<typeof signInWith>>,
  numbers: number[],
  place?: string,
) {
  const claims = JSON.parse(Buffer.from(response.grant.split('.')[1] ?? '', 'base64url').toString()) as { jti: string };
  const locationId = place ?? (await anyId('locations'));
  const bucketId = await anyId('buckets');
  const ops = numbers.map((deviceSeq) => {
    const entry = record({ type: 'bucket-relocated', body: { bucketId, locationId } }, 'mixer');
    return { ...entry, installId, deviceSeq, grantId: claims.jti, actorId: response.person.id };
  });
  const { results } = await applyPush(db, station, { protocol: 1, requestId: uuid(), ops }, deps());
  return results.map(({ outcome }) => outcome);
}

async function anyId(table: 'locations' | 'buckets'): Promise<string> {
  const row = await inShop(db, shopId, (trx) =>
    trx.selectFrom(table).select('id').where('shopId', '=', shopId).limit(1).executeTakeFirstOrThrow(),
  );
  return row.id;
}

test('what a station reports is remembered, and never goes back', async () => {
  const { station, installId } = await signInWith([]);
  await keepReport(db, station, installId, { waiting: 3, recorded: 12, offsetMs: 40 }, deps());
  expect(await installRow(installId)).toMatchObject({
    lastSeq: 12,
    pendingReported: 3,
    reportedAt: at,
    clockOffsetMs: 40,
  });
  await keepReport(db, station, installId, { waiting: 0, recorded: 9, offsetMs: 40 }, deps(1));
  expect(await installRow(installId)).toMatchObject({ lastSeq: 12, pendingReported: 0 });
});

test('a report that says nothing new writes no row', async () => {
  const { station, installId } = await signInWith([]);
  const report = { waiting: 0, recorded: 2, offsetMs: 40 };
  await keepReport(db, station, installId, report, deps());
  await keepReport(db, station, installId, { ...report, offsetMs: 3_000 }, deps(1));
  expect((await installRow(installId)).reportedAt).toEqual(at);
  await keepReport(db, station, installId, report, deps(11));
  expect((await installRow(installId)).reportedAt).toEqual(deps(11).now());
});

test('a station reports only for installs of its own', async () => {
  const mine = await signInWith([]);
  const other = await signInWith([]);
  await keepReport(db, mine.station, other.installId, { waiting: 1, recorded: 99, offsetMs: 0 }, deps());
  expect(await installRow(other.installId)).toMatchObject({ lastSeq: 0, reportedAt: null });
});

test('the number of an entry that arrives is remembered without a report', async () => {
  const signedIn = await signInWith([]);
  const { station, installId } = signedIn;
  await pushNumbers(signedIn, [1, 2]);
  expect((await signInWith([installId], station)).response.install.lastSeq).toBe(2);
});

test('a browser that was cleared is told what had arrived and which numbers had not, once, and the manager finds it', async () => {
  const signedIn = await signInWith([]);
  const { station, installId } = signedIn;
  expect(await pushNumbers(signedIn, [1, 2])).toEqual(['accepted', 'accepted']);
  expect(await pushNumbers(signedIn, [4], uuid())).toEqual(['rejected']);
  await keepReport(db, station, installId, { waiting: 3, recorded: 6, offsetMs: 0 }, deps(5));
  const cleared = await signInWith([], station);
  expect(cleared.installId).not.toBe(installId);
  const lost = {
    installId,
    sentUpTo: 4,
    missing: [3, 5, 6],
    missingCount: 3,
    lastContact: deps(5).now().toISOString(),
  };
  expect(cleared.response.lost).toEqual([lost]);
  expect(await audited('outbox-lost', installId)).toEqual([{ station: station.stationId, ...lost }]);
  expect((await signInWith([cleared.installId], station)).response.lost).toBeUndefined();
});

test('a browser whose outbox is there is told nothing, nor is a new one', async () => {
  const { station, installId, response } = await signInWith([]);
  expect(response.lost).toBeUndefined();
  expect((await signInWith([installId], station)).response.lost).toBeUndefined();
  expect(await audited('outbox-lost', installId)).toEqual([]);
});

test.each([
  ['ahead', -3_600_000, 3_600_000],
  ['back', 3_600_000, -3_600_000],
])(
  'a clock that went an hour %s between two contacts is in the audit log, with the entries in between',
  async (_, offsetMs, jumpMs) => {
    const { station, installId } = await signInWith([]);
    await keepReport(db, station, installId, { waiting: 1, recorded: 4, offsetMs: 0 }, deps());
    await keepReport(db, station, installId, { waiting: 0, recorded: 9, offsetMs }, deps(30));
    expect(await audited('clock-jump', installId)).toEqual([
      {
        station: station.stationId,
        installId,
        jumpMs,
        offsetBeforeMs: 0,
        offsetAfterMs: offsetMs,
        lastContact: at.toISOString(),
        entries: { after: 3, upTo: 9 },
      },
    ]);
  },
);

test('two minutes are no jump, and slow drift never adds up to one', async () => {
  const { station, installId } = await signInWith([]);
  for (let n = 0; n <= 10; n++)
    await keepReport(db, station, installId, { waiting: 0, recorded: 1, offsetMs: n * 60_000 }, deps(n));
  expect(await audited('clock-jump', installId)).toEqual([]);
});
