import { type Transaction, sql } from 'kysely';
import type { Database } from './connection.ts';
import type { DB } from './tables.ts';

export type ShopTransaction = Transaction<DB>;

/** Longer than any statement of ours takes; a lock that is not given by then is asked for again by the station. */
const STATEMENT_TIMEOUT = '30s';
const LOCK_TIMEOUT = '5s';

/**
 * The one way to a shop's rows: the settings hold for this transaction only, and row level security reads the first. A
 * sequential scan reads every shop's rows, and a foreign key's check that was planned while its table was small would keep
 * one for as long as the connection lives: the keys, which begin with the shop, are taken instead.
 */
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
    await sql`select set_config('app.shop_id', ${shopId}, true),
      set_config('statement_timeout', ${STATEMENT_TIMEOUT}, true),
      set_config('lock_timeout', ${LOCK_TIMEOUT}, true), set_config('enable_seqscan', 'off', true)`.execute(trx);
    return work(trx);
  });
}
