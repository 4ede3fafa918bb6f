import { type Kysely, sql } from 'kysely';

/** What a shop mixes from and for: families, components, lots, formulas, jobs, containers, scales, places. */
export async function up(db: Kysely<unknown>): Promise<void> {
  await createPlaces(db);
  await createComponents(db);
  await createFormulas(db);
  await createJobs(db);
  await protect(db);
}

async function createPlaces(db: Kysely<unknown>): Promise<void> {
  await sql`
    create table scales (
      shop_id uuid not null references shops (id),
      id uuid not null,
      station_id uuid,
      name text not null,
      readability_mg bigint not null check (readability_mg > 0),
      verification_mg bigint not null,
      repeatability_mg bigint not null,
      minimum_mg bigint not null,
      maximum_mg bigint not null,
      change_seq bigint not null,
      deleted_at timestamptz,
      primary key (shop_id, id),
      foreign key (shop_id, station_id) references stations (shop_id, id)
    )`.execute(db);
  await sql`
    create table containers (
      shop_id uuid not null references shops (id),
      id uuid not null,
      name text not null,
      capacity_ml int not null,
      tare_mg bigint not null,
      wall_loss_mg bigint not null,
      change_seq bigint not null,
      deleted_at timestamptz,
      primary key (shop_id, id)
    )`.execute(db);
  await sql`
    create table locations (
      shop_id uuid not null references shops (id),
      id uuid not null,
      code text not null,
      change_seq bigint not null,
      deleted_at timestamptz,
      primary key (shop_id, id),
      unique (shop_id, code)
    )`.execute(db);
}

async function createComponents(db: Kysely<unknown>): Promise<void> {
  await sql`
    create table families (
      shop_id uuid not null references shops (id),
      id uuid not null,
      name text not null,
      returns_allowed boolean not null,
      pot_life_min int,
      change_seq bigint not null,
      deleted_at timestamptz,
      primary key (shop_id, id)
    )`.execute(db);
  await sql`
    create table family_rules (
      shop_id uuid not null,
      id uuid not null,
      into_id uuid not null,
      from_id uuid not null,
      verdict text not null check (verdict in ('yes', 'no', 'never')),
      reason text not null,
      changed_by uuid,
      changed_at timestamptz not null,
      change_seq bigint not null,
      deleted_at timestamptz,
      primary key (shop_id, id),
      unique (shop_id, into_id, from_id),
      foreign key (shop_id, into_id) references families (shop_id, id),
      foreign key (shop_id, from_id) references families (shop_id, id)
    )`.execute(db);
  await sql`
    create table components (
      shop_id uuid not null,
      id uuid not null,
      code text not null,
      name text not null,
      kind text not null,
      family_id uuid not null,
      density numeric not null,
      price numeric,
      strong boolean not null,
      tolerance_ppb bigint,
      foreign_limit_ppb bigint not null,
      max_share_ppb bigint,
      cure_c int,
      hazards text[] not null,
      restrictions text[] not null,
      lab jsonb,
      hiding int not null,
      version int not null default 1,
      change_seq bigint not null,
      deleted_at timestamptz,
      primary key (shop_id, id),
      unique (shop_id, code),
      foreign key (shop_id, family_id) references families (shop_id, id)
    )`.execute(db);
  await sql`
    create table lots (
      shop_id uuid not null,
      id uuid not null,
      component_id uuid not null,
      code text not null,
      strength_ppm bigint not null,
      received_mg bigint not null,
      balance_mg bigint not null,
      use_by date,
      change_seq bigint not null,
      deleted_at timestamptz,
      primary key (shop_id, id),
      foreign key (shop_id, component_id) references components (shop_id, id)
    )`.execute(db);
}

async function createFormulas(db: Kysely<unknown>): Promise<void> {
  await sql`
    create table formulas (
      shop_id uuid not null references shops (id),
      id uuid not null,
      code text not null,
      name text not null,
      colour_ref text,
      change_seq bigint not null,
      deleted_at timestamptz,
      primary key (shop_id, id),
      unique (shop_id, code)
    )`.execute(db);
  await sql`
    create table formula_revisions (
      shop_id uuid not null,
      formula_id uuid not null,
      revision int not null,
      state text not null check (state in ('draft', 'approved', 'retired')),
      family_id uuid not null,
      lab jsonb,
      hiding int not null,
      approved_by uuid,
      base_revision int,
      primary key (shop_id, formula_id, revision),
      foreign key (shop_id, formula_id) references formulas (shop_id, id),
      foreign key (shop_id, family_id) references families (shop_id, id)
    )`.execute(db);
  await sql`
    create table formula_parts (
      shop_id uuid not null,
      formula_id uuid not null,
      revision int not null,
      position int not null,
      component_id uuid not null,
      parts numeric not null check (parts > 0),
      primary key (shop_id, formula_id, revision, position),
      foreign key (shop_id, formula_id, revision) references formula_revisions (shop_id, formula_id, revision),
      foreign key (shop_id, component_id) references components (shop_id, id)
    )`.execute(db);
}

async function createJobs(db: Kysely<unknown>): Promise<void> {
  await sql`
    create table jobs (
      shop_id uuid not null references shops (id),
      id uuid not null,
      number text not null,
      customer text not null,
      due timestamptz not null,
      garment text not null,
      compliance text[] not null,
      max_cure_c int,
      version int not null default 1,
      change_seq bigint not null,
      deleted_at timestamptz,
      primary key (shop_id, id),
      unique (shop_id, number)
    )`.execute(db);
  await sql`
    create table job_colours (
      shop_id uuid not null,
      job_id uuid not null,
      n int not null,
      formula_id uuid not null,
      prints int not null,
      need_low_mg bigint not null,
      need_mg bigint not null,
      need_high_mg bigint not null,
      used_mg bigint,
      primary key (shop_id, job_id, n),
      foreign key (shop_id, job_id) references jobs (shop_id, id),
      foreign key (shop_id, formula_id) references formulas (shop_id, id)
    )`.execute(db);
}

const SEEN_BY_STATIONS = [
  'scales',
  'containers',
  'locations',
  'families',
  'family_rules',
  'components',
  'lots',
  'formulas',
  'jobs',
];

async function protect(db: Kysely<unknown>): Promise<void> {
  for (const name of [...SEEN_BY_STATIONS, 'formula_revisions', 'formula_parts', 'job_colours']) {
    const table = sql.table(name);
    await sql`alter table ${table} enable row level security`.execute(db);
    await sql`alter table ${table} force row level security`.execute(db);
    await sql`
      create policy own_shop on ${table}
      using (shop_id = nullif(current_setting('app.shop_id', true), '')::uuid)`.execute(db);
    await sql`grant select, insert, update, delete on ${table} to halfpail_app`.execute(db);
  }
  for (const name of [...SEEN_BY_STATIONS, 'people']) {
    await sql`create index ${sql.id(`${name}_changes`)} on ${sql.table(name)} (shop_id, change_seq, id)`.execute(db);
  }
}
