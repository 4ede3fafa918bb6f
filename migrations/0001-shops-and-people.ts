import { type Kysely, sql } from 'kysely';

/** Shops, people, stations: `shop_id` first in every key, forced row level security from the first migration on. */
export async function up(db: Kysely<unknown>): Promise<void> {
  await sql`
    create table identities (
      id uuid primary key,
      email_lower text not null unique,
      password_hash text not null
    )`.execute(db);
  await sql`
    create table shops (
      id uuid primary key,
      name text not null,
      units text not null default 'g',
      locale text not null,
      time_zone text not null,
      currency text not null,
      settings jsonb not null,
      version int not null default 1,
      change_seq bigint not null,
      deleted_at timestamptz
    )`.execute(db);
  await sql`
    create table shop_sync (
      shop_id uuid primary key references shops (id),
      epoch uuid not null,
      seq bigint not null default 0
    )`.execute(db);
  await sql`
    create table people (
      shop_id uuid not null references shops (id),
      id uuid not null,
      identity_id uuid references identities (id),
      display_name text not null,
      role text not null check (role in ('mixer', 'operator', 'planner', 'manager', 'owner')),
      disabled_at timestamptz,
      change_seq bigint not null,
      deleted_at timestamptz,
      primary key (shop_id, id)
    )`.execute(db);
  await sql`create index people_identity on people (identity_id)`.execute(db);
  await sql`
    create table sessions (
      shop_id uuid not null,
      token_sha256 bytea not null,
      person_id uuid not null,
      created_at timestamptz not null,
      last_seen timestamptz not null,
      expires_at timestamptz not null,
      primary key (shop_id, token_sha256),
      foreign key (shop_id, person_id) references people (shop_id, id)
    )`.execute(db);
  await sql`
    create table stations (
      shop_id uuid not null references shops (id),
      id uuid not null,
      name text not null,
      token_sha256 bytea not null,
      expires_at timestamptz not null,
      revoked_at timestamptz,
      last_seen timestamptz not null,
      primary key (shop_id, id),
      unique (shop_id, name)
    )`.execute(db);
  await sql`
    create table installs (
      shop_id uuid not null,
      id uuid not null,
      station_id uuid not null,
      code_prefix text not null,
      last_seq bigint not null default 0,
      pending_reported int,
      primary key (shop_id, id),
      unique (shop_id, code_prefix),
      foreign key (shop_id, station_id) references stations (shop_id, id)
    )`.execute(db);
  await sql`
    create table grants (
      shop_id uuid not null,
      id uuid not null,
      station_id uuid not null,
      person_id uuid not null,
      role text not null,
      issued_at timestamptz not null,
      expires_at timestamptz not null,
      primary key (shop_id, id),
      foreign key (shop_id, station_id) references stations (shop_id, id),
      foreign key (shop_id, person_id) references people (shop_id, id)
    )`.execute(db);
  await sql`
    create table audit (
      shop_id uuid not null references shops (id),
      id uuid not null,
      at timestamptz not null,
      actor_id uuid,
      kind text not null,
      detail jsonb not null,
      primary key (shop_id, id)
    )`.execute(db);
  await protect(db);
  await signInFunction(db);
}

async function protect(db: Kysely<unknown>): Promise<void> {
  await sql`grant usage on schema public to halfpail_app`.execute(db);
  const tables = ['shop_sync', 'people', 'sessions', 'stations', 'installs', 'grants', 'audit'];
  for (const name of tables) {
    const table = sql.table(name);
    await sql`alter table ${table} enable row level security`.execute(db);
    await sql`alter table ${table} force row level security`.execute(db);
    await sql`
      create policy own_shop on ${table}
      using (shop_id = nullif(current_setting('app.shop_id', true), '')::uuid)`.execute(db);
    await sql`grant select, insert, update, delete on ${table} to halfpail_app`.execute(db);
  }
  await sql`alter table shops enable row level security`.execute(db);
  await sql`alter table shops force row level security`.execute(db);
  await sql`
    create policy own_shop on shops
    using (id = nullif(current_setting('app.shop_id', true), '')::uuid)`.execute(db);
  await sql`grant select, insert, update on shops to halfpail_app`.execute(db);
  await sql`revoke update, delete on audit from halfpail_app`.execute(db);
}

/**
 * The one look-up before the shop is known. Forced security binds the owner too, so the owner gets a policy of its own
 * to read people; the application's role can only call the function.
 */
async function signInFunction(db: Kysely<unknown>): Promise<void> {
  await sql`create policy sign_in on people for select to current_user using (true)`.execute(db);
  await sql`
    create function find_sign_in(email text)
    returns table (shop_id uuid, person_id uuid, password_hash text)
    language sql stable security definer set search_path = public, pg_temp
    as $$
      select p.shop_id, p.id, i.password_hash
      from identities i join people p on p.identity_id = i.id
      where i.email_lower = lower(email) and p.disabled_at is null and p.deleted_at is null
      order by p.shop_id
    $$`.execute(db);
  await sql`revoke all on function find_sign_in(text) from public`.execute(db);
  await sql`grant execute on function find_sign_in(text) to halfpail_app`.execute(db);
}
