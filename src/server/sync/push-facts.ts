import { type Selectable, type SqlBool, sql } from 'kysely';
import type { Composition } from '#domain/composition.ts';
import type { PartsPerBillion } from '#domain/mass.ts';
import type { ShopTransaction } from '#server/db/in-shop.ts';
import type { Buckets, Components } from '#server/db/tables.ts';
import type { PushReferences } from './push-references.ts';
import { among, readIds } from './read-ids.ts';
import { findRefused, releaseOf } from './refused-tubs.ts';

export type BucketRow = Selectable<Buckets>;

/** Tables of which only the ids count. */
const OWNED = ['jobs', 'locations', 'containers', 'scales', 'families', 'people'] as const;
export type OwnedTable = (typeof OWNED)[number] | 'components' | 'lots';

export interface Revision {
  formulaId: string;
  revision: number;
  name: string;
  familyId: string;
  lab: unknown;
  hiding: number;
}

/** What the shop has of the ids that a push names, as it stands under the shop's lock. */
export interface PushFacts {
  /** `revision`: of the formula that was proposed with it. */
  operations: ReadonlyMap<string, { hash: Buffer; changeSeq: number; revision: number | null }>;
  /** Of this station only. */
  installs: ReadonlySet<string>;
  grants: ReadonlyMap<string, { role: string; personId: string }>;
  owned: ReadonlyMap<OwnedTable, ReadonlySet<string>>;
  components: ReadonlyMap<string, Pick<Selectable<Components>, 'cureC' | 'restrictions' | 'hazards'>>;
  /** Use-by of each lot. */
  lots: ReadonlyMap<string, string | null>;
  /** By `formula/revision`. */
  revisions: ReadonlyMap<string, Revision>;
  /** Of each formula that is named. */
  newestRevisions: ReadonlyMap<string, number>;
  batches: ReadonlySet<string>;
  buckets: ReadonlyMap<string, BucketRow>;
  compositions: ReadonlyMap<string, Composition>;
  codes: ReadonlySet<string>;
  /** What is named, does not exist, and would have begun with an entry in quarantine, as `bornWith` names it. */
  refused: ReadonlySet<string>;
}

export const revisionKey = (formulaId: string, revision: number) => `${formulaId}/${revision}`;

/** One statement a table, however many operations there are. */
export async function readFacts(
  trx: ShopTransaction,
  { shopId, stationId }: { shopId: string; stationId: string },
  named: PushReferences,
): Promise<PushFacts> {
  const operations = await trx
    .selectFrom('operations as o')
    .leftJoin('formulaRevisions as r', (join) => join.onRef('r.shopId', '=', 'o.shopId').onRef('r.opId', '=', 'o.opId'))
    .select(['o.opId', 'o.hash', 'o.changeSeq', 'r.revision'])
    .where('o.shopId', '=', shopId)
    .where(among('o.opId', named.operations))
    .execute();
  const installs = await trx
    .selectFrom('installs')
    .select('id')
    .where('shopId', '=', shopId)
    .where('stationId', '=', stationId)
    .where(among('id', named.installs))
    .execute();
  const grants = await trx
    .selectFrom('grants')
    .select(['id', 'role', 'personId'])
    .where('shopId', '=', shopId)
    .where('stationId', '=', stationId)
    .where(among('id', named.grants))
    .execute();
  const components = await readComponents(trx, shopId, named);
  const lots = await readLots(trx, shopId, named);
  const revisions = await readRevisions(trx, shopId, named);
  const buckets = await readBuckets(trx, shopId, named);
  const ids = await readIds(trx, shopId, [
    ...OWNED.map((table) => [table, named[table]] as const),
    ['batches', named.batches] as const,
  ]);
  const batches = ids.get('batches') ?? new Set<string>();
  const missing = [...named.buckets, ...named.batches].filter(
    (id) => !buckets.has(id) && !batches.has(id) && !named.born.has(id),
  );
  const unreleased = [...buckets.values()].flatMap(({ id, released, batchId }) =>
    !released && batchId !== null && named.issuedAsReleased.has(id) ? [releaseOf(batchId)] : [],
  );
  return {
    operations: new Map(operations.map(({ opId, ...rest }) => [opId, rest])),
    installs: new Set(installs.map(({ id }) => id)),
    grants: new Map(grants.map(({ id, ...rest }) => [id, rest])),
    owned: new Map<OwnedTable, ReadonlySet<string>>([
      ...OWNED.map((table) => [table, ids.get(table) ?? new Set<string>()] as const),
      ['components', new Set(components.keys())],
      ['lots', new Set(lots.keys())],
    ]),
    components,
    lots,
    revisions,
    newestRevisions: newestOf(revisions),
    batches,
    buckets,
    compositions: await readCompositions(trx, shopId, named),
    codes: await readCodes(trx, shopId, named),
    refused: await findRefused(trx, shopId, [...missing, ...unreleased]),
  };
}

async function readComponents(trx: ShopTransaction, shopId: string, { components }: PushReferences) {
  if (components.size === 0) return new Map();
  const rows = await trx
    .selectFrom('components')
    .select(['id', 'cureC', 'restrictions', 'hazards'])
    .where('shopId', '=', shopId)
    .where(among('id', components))
    .execute();
  return new Map(rows.map(({ id, ...rest }) => [id, rest]));
}

async function readLots(trx: ShopTransaction, shopId: string, { lots }: PushReferences) {
  if (lots.size === 0) return new Map<string, string | null>();
  const rows = await trx
    .selectFrom('lots')
    .select(['id', 'useBy'])
    .where('shopId', '=', shopId)
    .where(among('id', lots))
    .execute();
  return new Map(rows.map(({ id, useBy }) => [id, useBy]));
}

async function readRevisions(trx: ShopTransaction, shopId: string, { formulas }: PushReferences) {
  if (formulas.size === 0) return new Map<string, Revision>();
  const rows = await trx
    .selectFrom('formulaRevisions as r')
    .innerJoin('formulas as f', (join) => join.onRef('f.shopId', '=', 'r.shopId').onRef('f.id', '=', 'r.formulaId'))
    .select(['r.formulaId', 'r.revision', 'f.name', 'r.familyId', 'r.lab', 'r.hiding'])
    .where('r.shopId', '=', shopId)
    .where(among('r.formulaId', formulas))
    .execute();
  return new Map(rows.map((row) => [revisionKey(row.formulaId, row.revision), row]));
}

function newestOf(revisions: ReadonlyMap<string, Revision>): Map<string, number> {
  const newest = new Map<string, number>();
  for (const { formulaId, revision } of revisions.values())
    newest.set(formulaId, Math.max(newest.get(formulaId) ?? 0, revision));
  return newest;
}

/** The tubs that are named, and those of the batches that are named: a release is of all of them. */
async function readBuckets(trx: ShopTransaction, shopId: string, { buckets, batches }: PushReferences) {
  if (buckets.size + batches.size === 0) return new Map<string, BucketRow>();
  const rows = await trx
    .selectFrom('buckets')
    .selectAll()
    .where('shopId', '=', shopId)
    .where((eb) => eb.or([among('id', buckets), among('batchId', batches)]))
    .execute();
  return new Map(rows.map((row) => [row.id, row]));
}

async function readCompositions(trx: ShopTransaction, shopId: string, { buckets }: PushReferences) {
  const found = new Map<string, Map<string, PartsPerBillion>>();
  if (buckets.size === 0) return found;
  const rows = await trx
    .selectFrom('bucketComposition')
    .select(['bucketId', 'componentId', 'ppb'])
    .where('shopId', '=', shopId)
    .where(among('bucketId', buckets))
    .execute();
  for (const { bucketId, componentId, ppb } of rows) {
    const shares = found.get(bucketId) ?? new Map<string, PartsPerBillion>();
    found.set(bucketId, shares.set(componentId, ppb as PartsPerBillion));
  }
  return found;
}

async function readCodes(trx: ShopTransaction, shopId: string, { codes }: PushReferences) {
  if (codes.size === 0) return new Set<string>();
  const rows = await trx
    .selectFrom('buckets')
    .select('code')
    .where('shopId', '=', shopId)
    .where(sql<SqlBool>`code = any(${[...codes]}::text[])`)
    .execute();
  return new Set(rows.map(({ code }) => code));
}
