import { type Kysely, sql } from 'kysely';

/** What an install told of itself at its last contact, and when it was found to be gone. */
export async function up(db: Kysely<unknown>): Promise<void> {
  await sql`
    alter table installs
      add column reported_at timestamptz,
      add column clock_offset_ms bigint,
      add column lost_at timestamptz`.execute(db);
  await sql`create index installs_of_station on installs (shop_id, station_id)`.execute(db);
}
