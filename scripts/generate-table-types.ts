import { execFileSync } from 'node:child_process';
import fs from 'node:fs';
import os from 'node:os';
import path from 'node:path';

const target = path.resolve('src/server/db/tables.ts');
const url = process.env['MIGRATE_DATABASE_URL'];
if (!url) throw new Error('MIGRATE_DATABASE_URL is missing');

/** Writes the table types of the migrated database; with --check it only says whether they match. */
function generate(file: string, connectionString: string): void {
  const words = ['--dialect', 'postgres', '--camel-case', '--out-file', file, '--numeric-parser', 'string'];
  const mapping = ['--type-mapping', '{"int8":"number","timestamptz":"Date","date":"string","jsonb":"unknown"}'];
  const program = path.resolve('node_modules/.bin/kysely-codegen');
  const tables = ['--include-pattern', 'public.*', '--exclude-pattern', 'kysely_*'];
  execFileSync(program, [...words, ...mapping, ...tables, '--url', connectionString], { stdio: 'pipe' });
}

if (process.argv.includes('--check')) {
  const fresh = path.join(fs.mkdtempSync(path.join(os.tmpdir(), 'tables-')), 'tables.ts');
  generate(fresh, url);
  if (fs.readFileSync(fresh, 'utf8') !== fs.readFileSync(target, 'utf8')) {
    console.error('src/server/db/tables.ts does not match the migrations: run npm run types.');
    process.exit(1);
  }
} else generate(target, url);
