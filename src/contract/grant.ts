import * as z from 'zod/mini';
import { uuid } from './identifiers.ts';
import { role } from './roles.ts';

export const GRANT_ISSUER = 'halfpail';
export const GRANT_AUDIENCE = 'halfpail-station';
export const GRANT_TYPE = 'station-grant+jwt';
export const GRANT_HOURS = 14;

/** The offline grant's claims, signed ES256: who may work on which station until when. */
export const grantClaims = z.object({
  jti: uuid,
  sub: uuid,
  name: z.string(),
  station: uuid,
  shop: uuid,
  role,
  iat: z.int(),
  exp: z.int(),
});
export type GrantClaims = z.infer<typeof grantClaims>;

/** Public halves only; the first key is the current one. */
export const publicKeys = z.object({
  keys: z.array(
    z.object({ kty: z.literal('EC'), crv: z.literal('P-256'), x: z.string(), y: z.string(), kid: z.string() }),
  ),
});
export type PublicKeys = z.infer<typeof publicKeys>;
