import { type Kysely, sql } from 'kysely';

/** The log of operations and what follows from it: batches, additions, buckets, movements. */
export async function up(db: Kysely<unknown>): Promise<void> {
  await createLog(db);
  await createBatches(db);
  await createBuckets(db);
  await createMovements(db);
  await protect(db);
}

async function createLog(db: Kysely<unknown>): Promise<void> {
  await sql`
    create table operations (
      shop_id uuid not null,
      op_id uuid not null,
      install_id uuid not null,
      device_seq bigint not null,
      actor_id uuid not null,
      grant_id uuid not null,
      type text not null,
      op_version int not null,
      envelope jsonb not null,
      hash bytea not null,
      corrected_time timestamptz not null,
      received_at timestamptz not null,
      change_seq bigint not null,
      outcome text not null,
      primary key (shop_id, op_id),
      foreign key (shop_id, install_id) references installs (shop_id, id),
      foreign key (shop_id, actor_id) references people (shop_id, id),
      foreign key (shop_id, grant_id) references grants (shop_id, id)
    )`.execute(db);
  await sql`create index operations_of_install on operations (shop_id, install_id, change_seq)`.execute(db);
  await sql`
    create table quarantine (
      shop_id uuid not null references shops (id),
      op_id uuid not null,
      hash bytea not null,
      station_id uuid not null,
      raw jsonb not null,
      problem jsonb not null,
      received_at timestamptz not null,
      resolved_by uuid,
      primary key (shop_id, op_id, hash),
      foreign key (shop_id, station_id) references stations (shop_id, id)
    )`.execute(db);
}

async function createBatches(db: Kysely<unknown>): Promise<void> {
  await sql`
    create table batches (
      shop_id uuid not null,
      id uuid not null,
      op_id uuid not null,
      formula_id uuid not null,
      revision int not null,
      planned_mg bigint not null,
      actual_mg bigint not null,
      reused_mg bigint not null,
      state text not null check (state in ('mixed', 'released')),
      light text,
      released_by uuid,
      mixed_by uuid not null,
      mixed_at timestamptz not null,
      job_id uuid,
      rush boolean not null,
      change_seq bigint not null,
      deleted_at timestamptz,
      primary key (shop_id, id),
      foreign key (shop_id, op_id) references operations (shop_id, op_id),
      foreign key (shop_id, formula_id, revision) references formula_revisions (shop_id, formula_id, revision),
      foreign key (shop_id, mixed_by) references people (shop_id, id),
      foreign key (shop_id, job_id) references jobs (shop_id, id)
    )`.execute(db);
}

async function createBuckets(db: Kysely<unknown>): Promise<void> {
  await sql`
    create table buckets (
      shop_id uuid not null,
      id uuid not null,
      code text not null,
      name text not null,
      formula_id uuid,
      revision int,
      batch_id uuid,
      family_id uuid not null,
      container_id uuid not null,
      tare_mg bigint not null,
      filled_mg bigint not null,
      filled_at timestamptz not null,
      filled_by uuid,
      location_id uuid,
      state text not null check (state in ('shelf', 'at-press', 'quarantine', 'empty', 'discarded')),
      grade text not null check (grade in ('untouched', 'returned', 'assumed', 'unknown')),
      released boolean not null,
      balance_mg bigint not null,
      needs_recount boolean not null,
      seen jsonb not null,
      use_by date,
      cure_c int,
      restrictions text[] not null,
      hazards text[] not null,
      generation int not null,
      reserved_for text,
      job_id uuid,
      lab jsonb,
      hiding int not null,
      change_seq bigint not null,
      deleted_at timestamptz,
      primary key (shop_id, id),
      unique (shop_id, code),
      foreign key (shop_id, formula_id) references formulas (shop_id, id),
      foreign key (shop_id, batch_id) references batches (shop_id, id),
      foreign key (shop_id, family_id) references families (shop_id, id),
      foreign key (shop_id, container_id) references containers (shop_id, id),
      foreign key (shop_id, location_id) references locations (shop_id, id),
      foreign key (shop_id, filled_by) references people (shop_id, id),
      foreign key (shop_id, job_id) references jobs (shop_id, id)
    )`.execute(db);
  await sql`
    create table additions (
      shop_id uuid not null,
      batch_id uuid not null,
      n int not null,
      actor_id uuid not null,
      scale_id uuid,
      component_id uuid,
      lot_id uuid,
      bucket_id uuid,
      planned_mg bigint not null,
      actual_mg bigint not null,
      added_at timestamptz not null,
      check ((component_id is null) <> (bucket_id is null)),
      primary key (shop_id, batch_id, n),
      foreign key (shop_id, batch_id) references batches (shop_id, id),
      foreign key (shop_id, actor_id) references people (shop_id, id),
      foreign key (shop_id, scale_id) references scales (shop_id, id),
      foreign key (shop_id, component_id) references components (shop_id, id),
      foreign key (shop_id, lot_id) references lots (shop_id, id),
      foreign key (shop_id, bucket_id) references buckets (shop_id, id)
    )`.execute(db);
  await sql`
    create table bucket_composition (
      shop_id uuid not null,
      bucket_id uuid not null,
      component_id uuid not null,
      ppb bigint not null check (ppb > 0),
      primary key (shop_id, bucket_id, component_id),
      foreign key (shop_id, bucket_id) references buckets (shop_id, id),
      foreign key (shop_id, component_id) references components (shop_id, id)
    )`.execute(db);
  await sql`
    create table bucket_parents (
      shop_id uuid not null,
      child_id uuid not null,
      parent_id uuid not null,
      mass_mg bigint not null,
      primary key (shop_id, child_id, parent_id),
      foreign key (shop_id, child_id) references buckets (shop_id, id),
      foreign key (shop_id, parent_id) references buckets (shop_id, id)
    )`.execute(db);
}

async function createMovements(db: Kysely<unknown>): Promise<void> {
  await sql`
    create table movements (
      shop_id uuid not null,
      op_id uuid not null,
      n int not null,
      bucket_id uuid not null,
      kind text not null check (kind in ('filled', 'folded-in', 'wall-loss', 'used', 'recounted', 'discarded')),
      delta_mg bigint not null,
      job_id uuid,
      primary key (shop_id, op_id, n),
      foreign key (shop_id, op_id) references operations (shop_id, op_id),
      foreign key (shop_id, bucket_id) references buckets (shop_id, id),
      foreign key (shop_id, job_id) references jobs (shop_id, id)
    )`.execute(db);
  await sql`create index movements_of_bucket on movements (shop_id, bucket_id)`.execute(db);
  await sql`
    create table lot_movements (
      shop_id uuid not null,
      op_id uuid not null,
      n int not null,
      lot_id uuid not null,
      delta_mg bigint not null,
      primary key (shop_id, op_id, n),
      foreign key (shop_id, op_id) references operations (shop_id, op_id),
      foreign key (shop_id, lot_id) references lots (shop_id, id)
    )`.execute(db);
  await sql`create index movements_of_lot on lot_movements (shop_id, lot_id)`.execute(db);
}

const APPEND_ONLY = ['operations', 'additions', 'movements', 'lot_movements', 'bucket_parents'];

async function protect(db: Kysely<unknown>): Promise<void> {
  for (const name of [...APPEND_ONLY, 'quarantine', 'batches', 'buckets', 'bucket_composition']) {
    const table = sql.table(name);
    await sql`alter table ${table} enable row level security`.execute(db);
    await sql`alter table ${table} force row level security`.execute(db);
    await sql`
      create policy own_shop on ${table}
      using (shop_id = nullif(current_setting('app.shop_id', true), '')::uuid)`.execute(db);
    await sql`grant select, insert on ${table} to halfpail_app`.execute(db);
  }
  await sql`grant update on quarantine, batches, buckets to halfpail_app`.execute(db);
  for (const name of ['batches', 'buckets']) {
    await sql`create index ${sql.id(`${name}_changes`)} on ${sql.table(name)} (shop_id, change_seq, id)`.execute(db);
  }
}
