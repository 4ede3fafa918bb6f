import { createHash, randomBytes } from 'node:crypto';

const SECRET = /^([0-9a-f-]{36})\.([A-Za-z0-9_-]{43})$/;

/** A 256-bit secret for a cookie; only its hash is stored. The shop in front says where to look. */
export function makeToken(shopId: string): { cookie: string; hash: Buffer } {
  const secret = randomBytes(32).toString('base64url');
  return { cookie: `${shopId}.${secret}`, hash: hashSecret(secret) };
}

export function readToken(cookie: string | undefined): { shopId: string; hash: Buffer } | undefined {
  const [, shopId, secret] = SECRET.exec(cookie ?? '') ?? [];
  return shopId === undefined || secret === undefined ? undefined : { shopId, hash: hashSecret(secret) };
}

function hashSecret(secret: string): Buffer {
  return createHash('sha256').update(secret).digest();
}
