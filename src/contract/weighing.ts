import * as z from 'zod/mini';
import { addition } from './operation-bodies.ts';
import { addedMilligrams, instant, milligrams, uuid } from './identifiers.ts';

const shares = z.array(z.object({ componentId: uuid, ppb: z.int() }));

/** A step still to be weighed. */
const step = z.discriminatedUnion('kind', [
  z.object({ kind: z.literal('component'), componentId: uuid, plannedMg: milligrams }),
  z.object({
    kind: z.literal('bucket'),
    bucketId: uuid,
    plannedMg: milligrams,
    empties: z.boolean(),
  }),
]);

/** An open batch as it lies on the disk after each step; closed by recording `batch-mixed`. */
export const weighing = z.object({
  id: uuid,
  formulaId: uuid,
  revision: z.int(),
  jobId: z.nullable(uuid),
  rush: z.boolean(),
  scaleId: uuid,
  /** What was asked for; `batchMg` is the total after repairs. */
  plannedMg: addedMilligrams,
  batchMg: addedMilligrams,
  remaining: z.array(step),
  /** Of each leftover in the plan, what it held when the plan was made. */
  leftovers: z.record(uuid, shares),
  additions: z.array(addition),
  startedAt: instant,
  startedBy: uuid,
  updatedAt: instant,
});
export type Weighing = z.infer<typeof weighing>;
export type OpenStep = z.infer<typeof step>;
