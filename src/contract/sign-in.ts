import * as z from 'zod/mini';
import { uuid } from './identifiers.ts';
import { publicKeys } from './grant.ts';
import { role } from './roles.ts';
import { lostInstall } from './station-report.ts';

export const signInRequest = z.object({
  email: z.string().check(z.minLength(3), z.maxLength(254)),
  password: z.string().check(z.minLength(1), z.maxLength(1024)),
  /** One for each shop that this browser has worked for; the server knows which is its own. */
  installIds: z.array(uuid).check(z.maxLength(20)),
  /** Used when none of them belongs to the person's shop. */
  newInstallId: uuid,
});
export type SignInRequest = z.infer<typeof signInRequest>;

/** Everything a station needs to open again without a network. */
export const signInResponse = z.object({
  serverTime: z.iso.datetime({ offset: true }),
  shop: z.object({ id: uuid, name: z.string(), locale: z.string() }),
  person: z.object({ id: uuid, displayName: z.string(), role }),
  station: z.object({ id: uuid, name: z.string(), isNew: z.boolean() }),
  install: z.object({ id: uuid, codePrefix: z.string(), lastSeq: z.int() }),
  grant: z.string(),
  keys: publicKeys,
  /** Set when the browser cleared what it kept here before. */
  lost: z.optional(z.array(lostInstall)),
});
export type SignInResponse = z.infer<typeof signInResponse>;
