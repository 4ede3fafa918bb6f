import { hash, verify } from '@node-rs/argon2';

/** argon2id (the package's default), t = 2, m = 19 MiB, p = 1: OWASP ASVS 5.0, Appendix C. */
const COST = { timeCost: 2, memoryCost: 19_456, parallelism: 1 };

export function hashPassword(password: string): Promise<string> {
  return hash(password, COST);
}

let decoy: Promise<string> | undefined;

/** The same work whether or not there is a hash to check against. */
export async function checkPassword(password: string, stored: string | undefined): Promise<boolean> {
  decoy ??= hashPassword('nobody has this password');
  const matches = await verify(stored ?? (await decoy), password);
  return matches && stored !== undefined;
}
