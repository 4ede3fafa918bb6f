import { v7 as uuid } from 'uuid';
import type { OperationBody } from '#contract/operation-bodies.ts';
import { codePrefix, makeBucketCode } from '#domain/bucket-code.ts';
import type { Milligrams } from '#domain/mass.ts';
import { makeToken } from '#server/auth/tokens.ts';
import type { Database } from '#server/db/connection.ts';
import { inShop } from '#server/db/in-shop.ts';

/** A station of the shop as the wire sees it: its cookie, its install, and what a person records on it. */
export interface BenchStation {
  cookie: string;
  installId: string;
  /** So many operations, not yet pushed: batches, each in a tub that is then moved, weighed again or used up. */
  record: (count: number) => unknown[];
}

interface Facts {
  formulaId: string;
  revision: number;
  components: readonly string[];
  containerId: string;
  locationId: string;
  personId: string;
}

const mg = (grams: number) => (grams * 1000) as Milligrams;
const DAY = 86_400_000;

/** Stations with a grant each, entered at once: signing in is not what is measured. */
export async function enrolStations(db: Database, shopId: string, count: number): Promise<BenchStation[]> {
  const facts = await readFacts(db, shopId);
  const now = new Date();
  const later = new Date(now.getTime() + 90 * DAY);
  return inShop(db, shopId, async (trx) => {
    const { installs } = await trx
      .selectFrom('installs')
      .select((eb) => eb.fn.countAll<number>().as('installs'))
      .where('shopId', '=', shopId)
      .executeTakeFirstOrThrow();
    const stations: BenchStation[] = [];
    for (let n = 0; n < count; n++) {
      const [stationId, installId, grantId] = [uuid(), uuid(), uuid()];
      const { cookie, hash } = makeToken(shopId);
      const station = {
        shopId,
        id: stationId,
        name: `Bench ${stationId.slice(-8)}`,
        tokenSha256: hash,
        expiresAt: later,
        lastSeen: now,
      };
      await trx.insertInto('stations').values(station).execute();
      const prefix = codePrefix(Number(installs) + 100 + n) ?? '';
      await trx.insertInto('installs').values({ shopId, id: installId, stationId, codePrefix: prefix }).execute();
      const grant = {
        shopId,
        id: grantId,
        stationId,
        personId: facts.personId,
        role: 'mixer',
        issuedAt: now,
        expiresAt: later,
      };
      await trx.insertInto('grants').values(grant).execute();
      stations.push({ cookie, installId, record: recorder(facts, { installId, grantId, prefix }) });
    }
    return stations;
  });
}

async function readFacts(db: Database, shopId: string): Promise<Facts> {
  return inShop(db, shopId, async (trx) => {
    const { formulaId, revision } = await trx
      .selectFrom('formulaRevisions')
      .select(['formulaId', 'revision'])
      .where('shopId', '=', shopId)
      .where('state', '=', 'approved')
      .limit(1)
      .executeTakeFirstOrThrow();
    const parts = await trx
      .selectFrom('formulaParts')
      .select('componentId')
      .where('shopId', '=', shopId)
      .where('formulaId', '=', formulaId)
      .where('revision', '=', revision)
      .execute();
    const first = (table: 'containers' | 'locations') =>
      trx.selectFrom(table).select('id').where('shopId', '=', shopId).limit(1).executeTakeFirstOrThrow();
    const mixer = await trx
      .selectFrom('people')
      .select('id')
      .where('shopId', '=', shopId)
      .where('role', '=', 'mixer')
      .limit(1)
      .executeTakeFirstOrThrow();
    return {
      formulaId,
      revision,
      components: parts.map(({ componentId }) => componentId),
      containerId: (await first('containers')).id,
      locationId: (await first('locations')).id,
      personId: mixer.id,
    };
  });
}

function recorder(facts: Facts, of: { installId: string; grantId: string; prefix: string }): BenchStation['record'] {
  let deviceSeq = 0;
  let codes = 0;
  const write = (body: OperationBody) => ({
    opId: uuid(),
    installId: of.installId,
    deviceSeq: ++deviceSeq,
    opVersion: 1,
    actorId: facts.personId,
    grantId: of.grantId,
    grantLapsed: false,
    deviceTime: new Date().toISOString(),
    clock: { offsetMs: 0, uncertaintyMs: 0, lastContact: null },
    seen: {},
    ...body,
  });
  return (count) => {
    const written: unknown[] = [];
    while (written.length < count) {
      const bucketId = uuid();
      written.push(write(batchInto(facts, bucketId, makeBucketCode(of.prefix, codes++))));
      written.push(write({ type: 'bucket-relocated', body: { bucketId, locationId: facts.locationId } }));
      written.push(
        write({
          type: 'bucket-recounted',
          body: { bucketId, grossMg: mg(560), tareMg: mg(68), displayedMg: mg(500), deltaMg: mg(-8) },
        }),
      );
      written.push(
        write({ type: 'bucket-discarded', body: { bucketId, displayedMg: mg(492), reason: 'Spilled', note: null } }),
      );
    }
    return written.slice(0, count);
  };
}

function batchInto(facts: Facts, bucketId: string, code: string): OperationBody {
  const at = new Date().toISOString();
  const additions = facts.components.map((componentId, n) => {
    const mass = mg(n === 0 ? 500 - 20 * (facts.components.length - 1) : 20);
    const actorId = facts.personId;
    return {
      kind: 'component' as const,
      componentId,
      lotId: null,
      scaleId: null,
      plannedMg: mass,
      actualMg: mass,
      at,
      actorId,
    };
  });
  const tub = { bucketId, code, containerId: facts.containerId, tareMg: mg(68), massMg: mg(500), locationId: null };
  return {
    type: 'batch-mixed',
    body: {
      batchId: uuid(),
      formulaId: facts.formulaId,
      revision: facts.revision,
      plannedMg: mg(500),
      jobId: null,
      rush: true,
      additions,
      release: { light: 'Daylight D65', byEye: true, at },
      filled: [tub],
    },
  };
}
