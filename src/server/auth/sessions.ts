import type { Role } from '#contract/roles.ts';
import type { Database } from '#server/db/connection.ts';
import { type ShopTransaction, inShop } from '#server/db/in-shop.ts';
import { SESSION_HOURS } from './cookies.ts';
import { makeToken, readToken } from './tokens.ts';

const IDLE_MS = 30 * 60_000;

export interface SignedIn {
  shopId: string;
  personId: string;
  displayName: string;
  role: Role;
}

/** A new session id at each sign-in. */
export async function startSession(trx: ShopTransaction, shopId: string, personId: string, now: Date): Promise<string> {
  const { cookie, hash } = makeToken(shopId);
  await trx
    .insertInto('sessions')
    .values({
      shopId,
      tokenSha256: hash,
      personId,
      createdAt: now,
      lastSeen: now,
      expiresAt: new Date(now.getTime() + SESSION_HOURS * 3_600_000),
    })
    .execute();
  return cookie;
}

/** The person behind a live session; idle 30 minutes or 12 hours old is none. */
export async function findSession(db: Database, cookie: string | undefined, now: Date): Promise<SignedIn | undefined> {
  const token = readToken(cookie);
  if (token === undefined) return undefined;
  return inShop(db, token.shopId, async (trx) => {
    const row = await trx
      .updateTable('sessions')
      .set({ lastSeen: now })
      .where('shopId', '=', token.shopId)
      .where('tokenSha256', '=', token.hash)
      .where('expiresAt', '>', now)
      .where('lastSeen', '>', new Date(now.getTime() - IDLE_MS))
      .returning('personId')
      .executeTakeFirst();
    if (row === undefined) return undefined;
    return findPerson(trx, token.shopId, row.personId);
  });
}

export async function findPerson(
  trx: ShopTransaction,
  shopId: string,
  personId: string,
): Promise<SignedIn | undefined> {
  const person = await trx
    .selectFrom('people')
    .select(['displayName', 'role'])
    .where('shopId', '=', shopId)
    .where('id', '=', personId)
    .where('disabledAt', 'is', null)
    .executeTakeFirst();
  return person && { shopId, personId, displayName: person.displayName, role: person.role as Role };
}

export async function endSession(db: Database, cookie: string | undefined): Promise<void> {
  const token = readToken(cookie);
  if (token === undefined) return;
  await inShop(db, token.shopId, (trx) =>
    trx.deleteFrom('sessions').where('shopId', '=', token.shopId).where('tokenSha256', '=', token.hash).execute(),
  );
}
