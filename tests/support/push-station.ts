import { sql } from 'kysely';
import { v7 as uuid } from 'uuid';
import type { OperationBody } from '#contract/operation-bodies.ts';
import type { Role } from '#contract/roles.ts';
import type { Milligrams } from '#domain/mass.ts';
import { type Database, openDatabase } from '#server/db/connection.ts';
import { inShop } from '#server/db/in-shop.ts';
import { applyPush } from '#server/sync/apply-push.ts';
import { seedDemo } from '#scripts/seed/seed-demo.ts';
import { makeFreshDatabase } from '#tests/support/fresh-database.ts';

export const now = new Date('2026-12-01T10:00:00Z');
export let db: Database;
export let shopId: string;

let fresh: Awaited<ReturnType<typeof makeFreshDatabase>>;
const station = { shopId: '', stationId: uuid() };
const installId = uuid();
const actors = new Map<Role, { personId: string; grantId: string }>();
let seq = 0;

/** The demo shop in a database of this test file, with one more station on which everybody may work. */
export async function openPushStation(): Promise<void> {
  fresh = await makeFreshDatabase();
  await seedDemo({ ownerUrl: fresh.ownerUrl, appUrl: fresh.appUrl, today: new Date('2026-12-01T00:00:00Z') });
  db = openDatabase(fresh.appUrl, 4);
  shopId = await findShop();
  station.shopId = shopId;
  await inShop(db, shopId, async (trx) => {
    const far = new Date('2027-06-01T00:00:00Z');
    const row = {
      shopId,
      id: station.stationId,
      name: 'Test',
      tokenSha256: Buffer.alloc(32),
      expiresAt: far,
      lastSeen: now,
    };
    await trx.insertInto('stations').values(row).execute();
    await trx
      .insertInto('installs')
      .values({ shopId, id: installId, stationId: station.stationId, codePrefix: 'YY' })
      .execute();
    for (const person of await trx.selectFrom('people').select(['id', 'role']).where('shopId', '=', shopId).execute()) {
      const grant = {
        shopId,
        id: uuid(),
        stationId: station.stationId,
        personId: person.id,
        role: person.role,
        issuedAt: now,
        expiresAt: far,
      };
      await trx.insertInto('grants').values(grant).execute();
      actors.set(person.role as Role, { personId: person.id, grantId: grant.id });
    }
  });
}

/** The application's connection. */
export const databaseUrl = () => fresh.appUrl;

export async function closePushStation(): Promise<void> {
  await db.destroy();
  await fresh.drop();
}

export const mg = (value: number) => value as Milligrams;

async function findShop(): Promise<string> {
  const found = await sql<{ shopId: string }>`select shop_id from find_sign_in('mixer@siltlane.example.test')`.execute(
    db,
  );
  return found.rows[0]?.shopId ?? '';
}

export function actor(role: Role): { personId: string; grantId: string } {
  const known = actors.get(role);
  if (known === undefined) throw new Error(`No ${role} in the demo shop.`);
  return known;
}

export function record(body: OperationBody, role: Role) {
  const { personId, grantId } = actor(role);
  const clock = { offsetMs: 0, uncertaintyMs: 0, lastContact: null };
  const envelope = {
    opId: uuid(),
    installId,
    deviceSeq: ++seq,
    opVersion: 1,
    actorId: personId,
    grantId,
    grantLapsed: false,
  };
  return { ...envelope, deviceTime: now.toISOString(), clock, seen: {}, ...body };
}

export async function push(ops: unknown[], revoked = false) {
  const answer = await applyPush(
    db,
    { ...station, revoked },
    { protocol: 1, requestId: uuid(), ops },
    { now: () => now, randomId: uuid },
  );
  return answer.results;
}

export async function quarantined(opId: string): Promise<string[]> {
  const rows = await inShop(db, shopId, (trx) =>
    trx.selectFrom('quarantine').select('problem').where('opId', '=', opId).execute(),
  );
  return rows.map((row) => (row.problem as { code: string }).code);
}

/** 400 g of a formula's first component and 100 g of its second, into a tub of 1 l. */
export async function aBatch(): Promise<Extract<OperationBody, { type: 'batch-mixed' }>> {
  return inShop(db, shopId, async (trx) => {
    const revision = await trx
      .selectFrom('formulaRevisions')
      .select(['formulaId', 'revision'])
      .where('state', '=', 'approved')
      .limit(1)
      .executeTakeFirstOrThrow();
    const parts = await trx
      .selectFrom('formulaParts')
      .select('componentId')
      .where('formulaId', '=', revision.formulaId)
      .where('revision', '=', revision.revision)
      .orderBy('position')
      .execute();
    const container = await trx
      .selectFrom('containers')
      .select('id')
      .where('name', '=', 'Tub 1 l')
      .executeTakeFirstOrThrow();
    const additions = [400_000, 100_000].map((actualMg, n) => ({
      kind: 'component' as const,
      componentId: parts[n]?.componentId ?? '',
      lotId: null,
      scaleId: null,
      plannedMg: mg(actualMg),
      actualMg: mg(actualMg),
      at: now.toISOString(),
      actorId: actor('mixer').personId,
    }));
    const filled = [
      {
        bucketId: uuid(),
        code: `YY${String(++seq).padStart(5, '0')}A`,
        containerId: container.id,
        tareMg: mg(68_000),
        massMg: mg(500_000),
        locationId: null,
      },
    ];
    return {
      type: 'batch-mixed',
      body: {
        batchId: uuid(),
        ...revision,
        plannedMg: mg(500_000),
        jobId: null,
        rush: true,
        additions,
        release: { light: 'Daylight D65', byEye: true, at: now.toISOString() },
        filled,
      },
    };
  });
}
