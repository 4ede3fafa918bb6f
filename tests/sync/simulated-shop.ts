import type { Milligrams } from '#domain/mass.ts';
import { codePrefix } from '#domain/bucket-code.ts';
import { inShop } from '#server/db/in-shop.ts';
import { GRANT_HOURS } from '#contract/grant.ts';
import { seededRandom } from '#scripts/seed/random.ts';
import { START } from '#tests/support/station.ts';
import { seededIds } from './simulated-ids.ts';
import type { Database } from '#server/db/connection.ts';

/** What the technicians of a simulated shop work with. */
export interface SimulatedShop {
  db: Database;
  shopId: string;
  personId: string;
  formulaId: string;
  componentIds: readonly [string, string];
  containerId: string;
  locationIds: readonly string[];
  enrolled: readonly Enrolled[];
}

export interface Enrolled {
  stationId: string;
  installId: string;
  grantId: string;
  codePrefix: string;
}

export const mg = (value: number) => value as Milligrams;

/** A small shop of its own for one seed, its ids a function of the seed. */
export async function makeSimulatedShop(db: Database, seed: number, stations: number): Promise<SimulatedShop> {
  const nextId = seededIds(seededRandom(seed ^ 0x5eed), () => START.getTime());
  const shopId = nextId();
  const shop = {
    shopId,
    personId: nextId(),
    formulaId: nextId(),
    componentIds: [nextId(), nextId()] as const,
    containerId: nextId(),
    locationIds: [nextId(), nextId(), nextId()],
    enrolled: Array.from({ length: stations }, (_, n) => ({
      stationId: nextId(),
      installId: nextId(),
      grantId: nextId(),
      codePrefix: codePrefix(n) ?? '',
    })),
  };
  await fill({ ...shop, db }, nextId);
  return { ...shop, db };
}

async function fill(shop: SimulatedShop, nextId: () => string): Promise<void> {
  const { db, shopId, personId, formulaId, componentIds, containerId } = shop;
  const seen = { shopId, changeSeq: 1 };
  await inShop(db, shopId, async (trx) => {
    const settings = JSON.stringify({
      worthOpeningMg: 100_000,
      maximumBuckets: 3,
      sliverMg: 30_000,
      minimumFromBucketMg: 20_000,
      errorLimit: 0.03,
    });
    const named = { name: 'Simulated', locale: 'en-GB', timeZone: 'Etc/UTC', currency: 'EUR', settings, changeSeq: 1 };
    await trx
      .insertInto('shops')
      .values({ id: shopId, ...named })
      .execute();
    await trx.insertInto('shopSync').values({ shopId, epoch: nextId(), seq: 1 }).execute();
    await trx
      .insertInto('people')
      .values({ ...seen, id: personId, displayName: 'Mixer', role: 'mixer' })
      .execute();
    const familyId = nextId();
    const family = { ...seen, id: familyId, name: 'Water-based', returnsAllowed: true };
    await trx.insertInto('families').values(family).execute();
    const limits = { density: 1.1, strong: false, foreignLimitPpb: 0, hazards: [], restrictions: [], hiding: 0 };
    const components = componentIds.map((id, n) => ({
      ...seen,
      ...limits,
      id,
      code: `C${n}`,
      name: `Component ${n}`,
      kind: 'base',
      familyId,
    }));
    await trx.insertInto('components').values(components).execute();
    await trx
      .insertInto('formulas')
      .values({ ...seen, id: formulaId, code: 'F1', name: 'First' })
      .execute();
    const revision = { shopId, formulaId, revision: 1 };
    await trx
      .insertInto('formulaRevisions')
      .values({ ...revision, state: 'approved', familyId, hiding: 0 })
      .execute();
    const parts = componentIds.map((componentId, n) => ({ ...revision, position: n + 1, componentId, parts: 1 }));
    await trx.insertInto('formulaParts').values(parts).execute();
    const container = { ...seen, id: containerId, name: 'Tub 1 l', capacityMl: 1000, tareMg: 68_000, wallLossMg: 5000 };
    await trx.insertInto('containers').values(container).execute();
    const places = shop.locationIds.map((id, n) => ({ ...seen, id, code: `P${n}` }));
    await trx.insertInto('locations').values(places).execute();
    await enrol(shop, trx);
  });
}

async function enrol(
  { shopId, personId, enrolled }: SimulatedShop,
  trx: Parameters<Parameters<typeof inShop>[2]>[0],
): Promise<void> {
  const [issuedAt, expiresAt] = [START, new Date(START.getTime() + GRANT_HOURS * 3_600_000)];
  for (const [n, { stationId, installId, grantId, codePrefix: prefix }] of enrolled.entries()) {
    const station = { shopId, id: stationId, name: `Station ${n + 1}`, expiresAt, lastSeen: issuedAt };
    await trx
      .insertInto('stations')
      .values({ ...station, tokenSha256: Buffer.from(stationId) })
      .execute();
    await trx.insertInto('installs').values({ shopId, id: installId, stationId, codePrefix: prefix }).execute();
    const grant = { shopId, id: grantId, stationId, personId, role: 'mixer', issuedAt, expiresAt };
    await trx.insertInto('grants').values(grant).execute();
  }
}
