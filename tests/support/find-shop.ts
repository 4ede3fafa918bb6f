import { sql } from 'kysely';
import type { Database } from '#server/db/connection.ts';

/** The shop of a person who may sign in. @throws Error when there is none */
export async function findShop(db: Database, email: string): Promise<string> {
  const { rows } = await sql<{ shopId: string }>`select shop_id from find_sign_in(${email})`.execute(db);
  if (rows[0] === undefined) throw new Error(`Nobody signs in as ${email}.`);
  return rows[0].shopId;
}
