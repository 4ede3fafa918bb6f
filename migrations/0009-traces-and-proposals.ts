import { type Kysely, sql } from 'kysely';

/** What makes a tub the same in whatever order its entries arrive; and who proposed a formula's revision, in which entry. */
export async function up(db: Kysely<unknown>): Promise<void> {
  await sql`alter table buckets add column trace jsonb`.execute(db);
  await sql`
    alter table formula_revisions
      add column op_id uuid,
      add column proposed_by uuid,
      add column name text,
      add column note text,
      add foreign key (shop_id, op_id) references operations (shop_id, op_id),
      add foreign key (shop_id, proposed_by) references people (shop_id, id)`.execute(db);
  await sql`create unique index revisions_of_operation on formula_revisions (shop_id, op_id)`.execute(db);
}
