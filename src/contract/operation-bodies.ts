import * as z from 'zod/mini';
import { addedMilligrams, bucketCode, instant, massChange, milligrams, note, shortText, uuid } from './identifiers.ts';
import { shiftReported } from './shift-report.ts';

/** One thing put into the pot: fresh from a component's lot, or out of a bucket. */
export const addition = z.discriminatedUnion('kind', [
  z.strictObject({
    kind: z.literal('component'),
    componentId: uuid,
    lotId: z.nullable(uuid),
    scaleId: z.nullable(uuid),
    plannedMg: milligrams,
    actualMg: addedMilligrams,
    at: instant,
    actorId: uuid,
  }),
  z.strictObject({
    kind: z.literal('bucket'),
    bucketId: uuid,
    scaleId: z.nullable(uuid),
    plannedMg: milligrams,
    actualMg: addedMilligrams,
    /** True when the bucket was scraped empty: what the books still hold is booked as wall loss. */
    empties: z.boolean(),
    /** What this station showed of it: fixed here, so that the batch is the same in whatever order entries arrive. */
    displayed: z.optional(
      z.strictObject({
        balanceMg: z.int(),
        grade: z.enum(['untouched', 'returned', 'assumed', 'unknown']),
        generation: z.int().check(z.minimum(0)),
      }),
    ),
    at: instant,
    actorId: uuid,
  }),
]);
export type Addition = z.infer<typeof addition>;

const release = z.strictObject({ light: shortText, byEye: z.boolean(), at: instant });

/** What the pot was filled into; a batch that was made is always in a labelled container. */
const filled = z.strictObject({
  bucketId: uuid,
  code: bucketCode,
  containerId: uuid,
  tareMg: milligrams,
  massMg: addedMilligrams,
  locationId: z.nullable(uuid),
});
export type Filled = z.infer<typeof filled>;

export const batchMixed = z.strictObject({
  batchId: uuid,
  formulaId: uuid,
  revision: z.int().check(z.minimum(1)),
  plannedMg: addedMilligrams,
  jobId: z.nullable(uuid),
  rush: z.boolean(),
  additions: z.array(addition).check(z.minLength(1), z.maxLength(100)),
  /** Null: mixed, labelled, not yet released. */
  release: z.nullable(release),
  filled: z.array(filled).check(z.minLength(1), z.maxLength(20)),
});

export const batchReleased = z.strictObject({ batchId: uuid, release });

export const bucketIssued = z.strictObject({
  bucketId: uuid,
  jobId: z.nullable(uuid),
  /** Named when an unreleased ink is issued all the same. */
  overrideReason: z.nullable(shortText),
});

/** Gross as read; the change is fixed here, at the scale, so that it adds up in any order. */
export const bucketReturned = z.strictObject({
  bucketId: uuid,
  jobId: z.nullable(uuid),
  grossMg: addedMilligrams,
  tareMg: milligrams,
  displayedMg: z.int(),
  deltaMg: massChange,
  condition: z.enum(['clean', 'lint', 'reduced', 'dirty']),
  locationId: z.nullable(uuid),
});

export const bucketRelocated = z.strictObject({ bucketId: uuid, locationId: uuid });

export const bucketRecounted = z.strictObject({
  bucketId: uuid,
  grossMg: addedMilligrams,
  tareMg: milligrams,
  displayedMg: z.int(),
  deltaMg: massChange,
});

export const bucketDiscarded = z.strictObject({
  bucketId: uuid,
  displayedMg: z.int(),
  reason: shortText,
  note: z.nullable(note),
});

/** A tub that was there before the books: weighed, and its content assumed or unknown. */
export const bucketAdopted = z.strictObject({
  bucketId: uuid,
  code: bucketCode,
  name: shortText,
  familyId: uuid,
  containerId: uuid,
  grossMg: addedMilligrams,
  tareMg: milligrams,
  locationId: z.nullable(uuid),
  /** Empty: unknown, and never folded in by composition. */
  composition: z.array(
    z.strictObject({ componentId: uuid, ppb: z.int().check(z.minimum(1), z.maximum(1_000_000_000)) }),
  ),
  lab: z.nullable(z.strictObject({ l: z.number(), a: z.number(), b: z.number() })),
});

/** An entry that the server refused and a person lets go; `reason` is for whoever looks at it later. */
export const entryDropped = z.strictObject({ opId: uuid, reason: shortText });

/** An edited formula: it becomes a draft of its own, whatever others made of the same base. */
export const formulaProposed = z.strictObject({
  formulaId: uuid,
  /** The revision that was edited. */
  baseRevision: z.int().check(z.minimum(1)),
  familyId: uuid,
  /** A new name, when it is to have one. */
  name: z.optional(shortText),
  /** As written, each component once. */
  parts: z
    .array(z.strictObject({ componentId: uuid, parts: z.string().check(z.regex(/^(?=.*[1-9])\d{1,6}(\.\d{1,6})?$/)) }))
    .check(z.minLength(1), z.maxLength(50)),
  note: z.nullable(note),
});

/** Every operation a station may record, by type. `opVersion` of each is 1. */
export const operationBodies = {
  'batch-mixed': batchMixed,
  'batch-released': batchReleased,
  'bucket-issued': bucketIssued,
  'bucket-returned': bucketReturned,
  'bucket-relocated': bucketRelocated,
  'bucket-recounted': bucketRecounted,
  'bucket-discarded': bucketDiscarded,
  'bucket-adopted': bucketAdopted,
  'shift-reported': shiftReported,
  'entry-dropped': entryDropped,
  'formula-proposed': formulaProposed,
} as const;

export type OperationType = keyof typeof operationBodies;
export type OperationBody = {
  [T in OperationType]: { type: T; body: z.infer<(typeof operationBodies)[T]> };
}[OperationType];
