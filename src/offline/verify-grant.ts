import { createLocalJWKSet, jwtVerify } from 'jose';
import {
  GRANT_AUDIENCE,
  GRANT_ISSUER,
  GRANT_TYPE,
  type GrantClaims,
  type PublicKeys,
  grantClaims,
} from '#contract/grant.ts';

/** The grant's claims when one of the pinned keys signed it; its age is judged apart. */
export async function verifyGrant(grant: string, keys: PublicKeys): Promise<GrantClaims | undefined> {
  try {
    const { payload } = await jwtVerify(grant, createLocalJWKSet(keys), {
      algorithms: ['ES256'],
      issuer: GRANT_ISSUER,
      audience: GRANT_AUDIENCE,
      typ: GRANT_TYPE,
      // A lapsed grant never stops who is recording: the operations say that it lapsed.
      currentDate: new Date(0),
    });
    const claims = grantClaims.safeParse(payload);
    return claims.success ? claims.data : undefined;
  } catch {
    return undefined;
  }
}
