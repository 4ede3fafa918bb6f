import { type Transaction, sql } from 'kysely';
import type { Database } from './connection.ts';
import type { DB } from './tables.ts';

export type ShopTransaction = Transaction<DB>;

/** The one way to a shop's rows: the setting holds for this transaction only, and row level security reads it. */
export function inShop<T>(
  db: Database,
  shopId: string,
  work: (trx: ShopTransaction) => Promise<T>,
  options: { snapshot?: boolean } = {},
): Promise<T> {
  const transaction = db
    .transaction()
    .setIsolationLevel(options.snapshot === true ? 'repeatable read' : 'read committed');
  return transaction.execute(async (trx) => {
    await sql`select set_config('app.shop_id', ${shopId}, true)`.execute(trx);
    return work(trx);
  });
}
