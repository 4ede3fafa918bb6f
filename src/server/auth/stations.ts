import { codePrefix } from '#domain/bucket-code.ts';
import type { Database } from '#server/db/connection.ts';
import { type ShopTransaction, inShop } from '#server/db/in-shop.ts';
import { STATION_DAYS } from './cookies.ts';
import { makeToken, readToken } from './tokens.ts';

export interface KnownStation {
  shopId: string;
  stationId: string;
  name: string;
  revoked: boolean;
  /** Revoked, and still heard: what it recorded is kept for a manager to look at, and nothing is told to it. */
  mayHandIn: boolean;
}

/** Days after it was revoked in which a station may still hand in what it recorded. */
const HAND_IN_DAYS = 30;
/** When a station was last seen is known to the minute: a write a request would cost more than what is asked. */
const SEEN_MS = 60_000;

export interface Install {
  id: string;
  codePrefix: string;
  lastSeq: number;
}

export async function findStation(
  db: Database,
  cookie: string | undefined,
  now: Date,
): Promise<KnownStation | undefined> {
  const token = readToken(cookie);
  if (token === undefined) return undefined;
  const row = await inShop(db, token.shopId, async (trx) => {
    const known = await trx
      .selectFrom('stations')
      .select(['id', 'name', 'revokedAt', 'lastSeen'])
      .where('shopId', '=', token.shopId)
      .where('tokenSha256', '=', token.hash)
      .where('expiresAt', '>', now)
      .executeTakeFirst();
    if (known !== undefined && now.getTime() - known.lastSeen.getTime() > SEEN_MS)
      await trx
        .updateTable('stations')
        .set({ lastSeen: now })
        .where('shopId', '=', token.shopId)
        .where('id', '=', known.id)
        .execute();
    return known;
  });
  if (row === undefined) return undefined;
  const { id: stationId, name, revokedAt } = row;
  const mayHandIn = revokedAt === null || now.getTime() - revokedAt.getTime() < HAND_IN_DAYS * 86_400_000;
  return { shopId: token.shopId, stationId, name, revoked: revokedAt !== null, mayHandIn };
}

/** A browser's first sign-in makes it a station of the shop, with a name that is free. */
export async function enrolStation(
  trx: ShopTransaction,
  shopId: string,
  id: string,
  now: Date,
): Promise<{ station: KnownStation; cookie: string }> {
  await lockShop(trx, shopId);
  const { count } = await trx
    .selectFrom('stations')
    .select((eb) => eb.fn.countAll<number>().as('count'))
    .where('shopId', '=', shopId)
    .executeTakeFirstOrThrow();
  const name = `Station ${Number(count) + 1}`;
  const { cookie, hash } = makeToken(shopId);
  const expiresAt = new Date(now.getTime() + STATION_DAYS * 86_400_000);
  await trx.insertInto('stations').values({ shopId, id, name, tokenSha256: hash, expiresAt, lastSeen: now }).execute();
  return { station: { shopId, stationId: id, name, revoked: false, mayHandIn: true }, cookie };
}

/** The install among those that the browser offers, or a new one with a code prefix that nobody has. */
export async function requireInstall(
  trx: ShopTransaction,
  station: KnownStation,
  offered: readonly string[],
  newId: string,
): Promise<Install> {
  const { shopId, stationId } = station;
  if (offered.length > 0) {
    // One that was taken for lost and is here after all is not lost.
    const known = await trx
      .updateTable('installs')
      .set({ lostAt: null })
      .where('shopId', '=', shopId)
      .where('stationId', '=', stationId)
      .where('id', 'in', [...offered])
      .returning(['id', 'codePrefix', 'lastSeq'])
      .executeTakeFirst();
    if (known !== undefined) return known;
  }
  await lockShop(trx, shopId);
  const { count } = await trx
    .selectFrom('installs')
    .select((eb) => eb.fn.countAll<number>().as('count'))
    .where('shopId', '=', shopId)
    .executeTakeFirstOrThrow();
  const prefix = codePrefix(Number(count));
  if (prefix === undefined) throw new Error('All code prefixes of this shop are given.');
  await trx.insertInto('installs').values({ shopId, id: newId, stationId, codePrefix: prefix }).execute();
  return { id: newId, codePrefix: prefix, lastSeq: 0 };
}

/** Names and prefixes are given one after another. */
async function lockShop(trx: ShopTransaction, shopId: string): Promise<void> {
  await trx.selectFrom('shopSync').select('seq').where('shopId', '=', shopId).forUpdate().executeTakeFirstOrThrow();
}
