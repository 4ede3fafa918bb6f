import * as z from 'zod/mini';
import { uuid } from './identifiers.ts';
import { problem } from './problem.ts';

export const PROTOCOL = 1;
export const LARGEST_PUSH_OPERATIONS = 50;
export const LARGEST_PUSH_BYTES = 256 * 1024;

/** Only the wrapper: each operation is parsed alone, so that one bad one never wedges the queue. */
export const pushRequest = z.object({
  protocol: z.literal(PROTOCOL),
  requestId: uuid,
  ops: z.array(z.unknown()).check(z.minLength(1), z.maxLength(LARGEST_PUSH_OPERATIONS)),
});
export type PushRequest = z.infer<typeof pushRequest>;

/** The number that a proposed formula was given. */
const revision = z.optional(z.int());

export const pushOutcome = z.discriminatedUnion('outcome', [
  z.object({ opId: uuid, outcome: z.literal('accepted'), changeSeq: z.int(), revision }),
  z.object({ opId: uuid, outcome: z.literal('duplicate'), changeSeq: z.int(), revision }),
  z.object({ opId: uuid, outcome: z.literal('rejected'), problem }),
  z.object({ opId: uuid, outcome: z.literal('retry') }),
]);
export type PushOutcome = z.infer<typeof pushOutcome>;

export const pushResponse = z.object({
  protocol: z.literal(PROTOCOL),
  requestId: uuid,
  serverTime: z.iso.datetime({ offset: true }),
  results: z.array(pushOutcome),
});
export type PushResponse = z.infer<typeof pushResponse>;
