import * as z from 'zod/mini';
import { instant, uuid } from './identifiers.ts';
import { operationBodies, type OperationBody, type OperationType } from './operation-bodies.ts';

/** For each bucket touched: the last operation of each install that the station knew of. */
export const seenByBucket = z.record(uuid, z.record(uuid, z.int()));
export type SeenByBucket = z.infer<typeof seenByBucket>;

const clock = z.strictObject({ offsetMs: z.number(), uncertaintyMs: z.number(), lastContact: z.nullable(instant) });

/** The part that is the same for every operation; `installId` and `deviceSeq` find gaps, they never gate. */
const envelope = {
  opId: uuid,
  installId: uuid,
  deviceSeq: z.int().check(z.minimum(1)),
  opVersion: z.literal(1),
  actorId: uuid,
  grantId: uuid,
  grantLapsed: z.boolean(),
  deviceTime: instant,
  clock,
  seen: seenByBucket,
  supersedes: z.optional(uuid),
};

const typed = (Object.keys(operationBodies) as OperationType[]).map((type) =>
  z.strictObject({ ...envelope, type: z.literal(type), body: operationBodies[type] }),
);

export type Operation = z.infer<z.ZodMiniObject<typeof envelope>> & OperationBody;

/** The frozen envelope: what is pushed, stored in the outbox and kept in the server's log. */
export const operation = z.discriminatedUnion('type', typed as never) as unknown as z.ZodMiniType<Operation, unknown>;

/** What must be readable for a refused operation to be listed at all. */
export const operationId = z.looseObject({ opId: uuid });

/** What an entry that cannot be read corrects, if it says so. */
export const corrected = z.looseObject({ supersedes: uuid });

export const LARGEST_OPERATION_BYTES = 64 * 1024;
