import fs from 'node:fs/promises';
import path from 'node:path';
import { fileURLToPath } from 'node:url';
import { FileMigrationProvider, Kysely, Migrator, PostgresDialect } from 'kysely';
import pg from 'pg';
import { makeQueues } from '#server/jobs/make-queues.ts';
import { roles } from './databases.mjs';

const migrationFolder = path.resolve(path.dirname(fileURLToPath(import.meta.url)), '../migrations');

/** Brings the database of MIGRATE_DATABASE_URL, the owner's connection, to the latest migration. */
async function migrateToLatest(connectionString: string) {
  const pool = new pg.Pool({ connectionString, max: 1 });
  const db = new Kysely<unknown>({ dialect: new PostgresDialect({ pool }) });
  const provider = new FileMigrationProvider({ fs, path, migrationFolder });
  // Pieces that are made side by side land in any order; a database may have the later number already.
  const migrator = new Migrator({ db, provider, allowUnorderedMigrations: true });
  const { error, results } = await migrator.migrateToLatest();
  for (const { status, migrationName } of results ?? []) console.log(`migration ${migrationName}: ${status}`);
  if (error === undefined) await makeQueues({ connectionString, query: (text) => pool.query(text) }, roles.app);
  await db.destroy();
  if (error) throw error;
}

const connectionString = process.env['MIGRATE_DATABASE_URL'];
if (!connectionString) throw new Error('MIGRATE_DATABASE_URL is missing');
await migrateToLatest(connectionString);
