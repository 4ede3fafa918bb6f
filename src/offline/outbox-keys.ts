import * as z from 'zod/mini';
import { publicKeys } from '#contract/grant.ts';
import { lostInstall } from '#contract/station-report.ts';
import type { Outbox } from './outbox.ts';

const clock = z.object({ offsetMs: z.number(), uncertaintyMs: z.number(), lastContact: z.nullable(z.string()) });
export type Clock = z.infer<typeof clock>;

/** What the outbox keeps by name, parsed when read. */
const schemas = {
  deviceSeq: z.int(),
  tubCounter: z.int(),
  codePrefix: z.string(),
  grant: z.string(),
  publicKeys,
  clock,
  /** Kept until a person has read it: when it was found, and by how many ms the clock went ahead. */
  clockJump: z.object({ at: z.string(), jumpMs: z.number() }),
  /** Kept until a person has read it: what the browser cleared before this sign-in. */
  lost: z.array(lostInstall),
  shop: z.object({ id: z.string(), name: z.string(), locale: z.string() }),
  station: z.object({ id: z.string(), name: z.string() }),
} as const;

type Keys = { [K in keyof typeof schemas]: z.infer<(typeof schemas)[K]> };

export async function findKey<K extends keyof Keys>(outbox: Outbox, name: K): Promise<Keys[K] | undefined> {
  const row = await outbox.keys.get(name);
  if (row === undefined) return undefined;
  const parsed = schemas[name].safeParse(row.value);
  return parsed.success ? (parsed.data as Keys[K]) : undefined;
}

export async function putKey<K extends keyof Keys>(outbox: Outbox, name: K, value: Keys[K]): Promise<void> {
  await outbox.keys.put({ name, value });
}

/** The next number of a counter; inside the caller's transaction, so that it is given once. */
export async function nextOf(outbox: Outbox, name: 'deviceSeq' | 'tubCounter'): Promise<number> {
  const next = ((await findKey(outbox, name)) ?? 0) + 1;
  await putKey(outbox, name, next);
  return next;
}
