import { CamelCasePlugin, Kysely, PostgresDialect } from 'kysely';
import pg from 'pg';
import { env } from '#server/env.ts';
import type { DB } from './tables.ts';

export type Database = Kysely<DB>;

const INT8 = 20;
const DATE = 1082;

/** Sixty-four bits that do not fit a safe integer are no mass of ours. */
function parseSafe(text: string): number {
  const value = Number(text);
  if (!Number.isSafeInteger(value)) throw new RangeError(`${text} is not a safe integer.`);
  return value;
}

const types = {
  getTypeParser: ((oid: number, format: 'text') => {
    if (oid === INT8) return parseSafe;
    if (oid === DATE) return (text: string) => text;
    return pg.types.getTypeParser(oid, format);
  }) as typeof pg.types.getTypeParser,
};

/** Of one process. */
export const MOST_CONNECTIONS = 10;

/** No named statements and no settings at connect: the pool may stand behind a transaction pooler. */
export function openDatabase(connectionString: string, max = MOST_CONNECTIONS): Database {
  return new Kysely<DB>({
    dialect: new PostgresDialect({ pool: postgresPool(connectionString, max) }),
    plugins: [new CamelCasePlugin({ maintainNestedObjectKeys: true })],
  });
}

/** Masses come back as safe integers, dates as text. */
export function postgresPool(connectionString: string, max: number): pg.Pool {
  const pool = new pg.Pool({ connectionString, max, types, connectionTimeoutMillis: 5000 });
  pool.on('error', () => {
    // An idle connection that breaks is replaced by the next query.
  });
  // One that breaks in the middle of a request fails that request; unheard, the event would end the process.
  pool.on('connect', (client) => client.on('error', () => {}));
  return pool;
}

let shared: Database | undefined;

/** The application's pool of this process. */
export function database(): Database {
  shared ??= openDatabase(env().DATABASE_URL);
  return shared;
}
