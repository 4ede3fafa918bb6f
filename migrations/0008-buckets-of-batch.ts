import { type Kysely, sql } from 'kysely';

/**
 * A release is of all tubs of its batch: without this, every push reads the whole shelf. Partial, so that a foreign key's
 * check that is planned before there are statistics does not take it for the primary key.
 */
export async function up(db: Kysely<unknown>): Promise<void> {
  await sql`create index buckets_of_batch on buckets (shop_id, batch_id) where batch_id is not null`.execute(db);
}
