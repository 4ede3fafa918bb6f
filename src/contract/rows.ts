import * as z from 'zod/mini';
import { uuid } from './identifiers.ts';
import { role } from './roles.ts';

const id = { id: uuid };
const lab = z.nullable(z.object({ l: z.number(), a: z.number(), b: z.number() }));
/** What a station needs of a tub's entries to go on from here; null in rows from before there were traces. */
const seen = z.record(z.string(), z.int());
const trace = z.object({
  open: z.array(
    z.object({
      installId: z.string(),
      kind: z.enum(['spend', 'spend-weighed', 'recount', 'discard']),
      at: seen,
    }),
  ),
  beyond: z.optional(seen),
  told: z.partialRecord(
    z.enum(['state', 'locationId', 'jobId', 'tareMg', 'ink']),
    z.object({ size: z.int(), opId: z.string() }),
  ),
});
const shares = z.array(z.object({ componentId: uuid, ppb: z.int() }));

/** Rows as a station holds them; each is the whole of its entity, children included. Masses in mg, shares in ppb. */
export const rows = {
  shop: z.object({
    ...id,
    name: z.string(),
    locale: z.string(),
    timeZone: z.string(),
    settings: z.object({
      /** κ: grams a bucket must save to be opened. */
      worthOpeningMg: z.int(),
      /** K: buckets opened for one batch, at most. */
      maximumBuckets: z.int(),
      sliverMg: z.int(),
      minimumFromBucketMg: z.int(),
      /** ℓ, the relative weighing error that is warned about. */
      errorLimit: z.number(),
    }),
  }),
  people: z.object({ ...id, displayName: z.string(), role, disabled: z.boolean() }),
  scales: z.object({
    ...id,
    stationId: z.nullable(uuid),
    name: z.string(),
    readabilityMg: z.int(),
    repeatabilityMg: z.int(),
    minimumMg: z.int(),
    maximumMg: z.int(),
  }),
  containers: z.object({ ...id, name: z.string(), capacityMl: z.int(), tareMg: z.int(), wallLossMg: z.int() }),
  locations: z.object({ ...id, code: z.string() }),
  families: z.object({ ...id, name: z.string(), returnsAllowed: z.boolean(), potLifeMin: z.nullable(z.int()) }),
  /** One row a pair of families; no row means: not allowed. */
  familyRules: z.object({
    ...id,
    intoId: uuid,
    fromId: uuid,
    verdict: z.enum(['yes', 'no', 'never']),
    reason: z.string(),
  }),
  components: z.object({
    ...id,
    code: z.string(),
    name: z.string(),
    kind: z.enum(['base', 'clear', 'white', 'pigment', 'ready', 'fluorescent', 'effect', 'additive']),
    familyId: uuid,
    densityGPerCm3: z.number(),
    strong: z.boolean(),
    /** τ as a part of its own share, ppb; null: the shop's default for its kind. */
    tolerancePpb: z.nullable(z.int()),
    foreignLimitPpb: z.int(),
    cureC: z.nullable(z.int()),
    hazards: z.array(z.string()),
    restrictions: z.array(z.string()),
    lab,
    /** 0 to 100: how well a film of it covers black. */
    hiding: z.int(),
  }),
  lots: z.object({
    ...id,
    componentId: uuid,
    code: z.string(),
    strengthPpm: z.int(),
    useBy: z.nullable(z.string()),
    balanceMg: z.int(),
  }),
  formulas: z.object({
    ...id,
    code: z.string(),
    name: z.string(),
    /** Newest approved revision first; a draft may be weighed, marked unapproved. */
    revisions: z.array(
      z.object({
        revision: z.int(),
        state: z.enum(['draft', 'approved', 'retired']),
        familyId: uuid,
        lab,
        hiding: z.int(),
        /** What it was edited from; not always the newest one at that time: then both are kept. */
        baseRevision: z.optional(z.nullable(z.int())),
        proposedBy: z.optional(z.nullable(uuid)),
        /** As proposed; null: it keeps the formula's. */
        name: z.optional(z.nullable(z.string())),
        note: z.optional(z.nullable(z.string())),
        parts: z.array(z.object({ componentId: uuid, parts: z.string() })),
      }),
    ),
  }),
  jobs: z.object({
    ...id,
    number: z.string(),
    customer: z.string(),
    due: z.string(),
    garment: z.string(),
    maxCureC: z.nullable(z.int()),
    compliance: z.array(z.string()),
    colours: z.array(
      z.object({
        n: z.int(),
        formulaId: uuid,
        prints: z.int(),
        needLowMg: z.int(),
        needMg: z.int(),
        needHighMg: z.int(),
      }),
    ),
  }),
  batches: z.object({
    ...id,
    formulaId: uuid,
    revision: z.int(),
    plannedMg: z.int(),
    actualMg: z.int(),
    reusedMg: z.int(),
    state: z.enum(['mixed', 'released']),
    light: z.nullable(z.string()),
    releasedBy: z.nullable(uuid),
    mixedBy: uuid,
    mixedAt: z.string(),
    jobId: z.nullable(uuid),
    rush: z.boolean(),
  }),
  buckets: z.object({
    ...id,
    code: z.string(),
    name: z.string(),
    formulaId: z.nullable(uuid),
    revision: z.nullable(z.int()),
    batchId: z.nullable(uuid),
    familyId: uuid,
    containerId: uuid,
    tareMg: z.int(),
    filledMg: z.int(),
    filledAt: z.string(),
    filledBy: z.nullable(uuid),
    locationId: z.nullable(uuid),
    state: z.enum(['shelf', 'at-press', 'quarantine', 'empty', 'discarded']),
    grade: z.enum(['untouched', 'returned', 'assumed', 'unknown']),
    released: z.boolean(),
    /** The sum of its movements; below zero where two stations spent the same ink. */
    balanceMg: z.int(),
    needsRecount: z.boolean(),
    seen: z.record(uuid, z.int()),
    trace: z.optional(z.nullable(trace)),
    composition: shares,
    useBy: z.nullable(z.string()),
    cureC: z.nullable(z.int()),
    restrictions: z.array(z.string()),
    hazards: z.array(z.string()),
    generation: z.int(),
    reservedFor: z.nullable(z.string()),
    jobId: z.nullable(uuid),
    parents: z.array(z.object({ bucketId: uuid, massMg: z.int() })),
    lab,
    hiding: z.int(),
  }),
} as const;

export type TableName = keyof typeof rows;
export type Row<T extends TableName> = z.infer<(typeof rows)[T]>;
export const tableNames = Object.keys(rows) as readonly TableName[];
