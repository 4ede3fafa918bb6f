import { type Insertable, sql } from 'kysely';
import type { ShopTransaction } from '#server/db/in-shop.ts';
import type { DB } from '#server/db/tables.ts';

/** Columns of type jsonb; their values come as JSON text already. */
const JSON_COLUMNS = new Set(['envelope', 'lab', 'seen', 'trace']);
/** camelCase to the column's name, each worked out once. */
const columnNames = new Map<string, string>();

/**
 * Inserts the rows of one table in one statement with one parameter: thousands of parameters take longer to compile, send
 * and parse than the rows take to insert. A key that a row lacks is null.
 */
export async function insertRows<T extends keyof DB>(
  trx: ShopTransaction,
  table: T,
  rows: readonly Insertable<DB[T]>[],
): Promise<void> {
  if (rows.length === 0) return;
  const keys = [...new Set(rows.flatMap((row) => Object.keys(row)))];
  const columns = sql.join(keys.map((key) => sql.ref(key)));
  const json = `[${rows.map((row) => rowText(row)).join(',')}]`;
  await sql`
    insert into ${sql.table(table)} (${columns})
    select ${columns} from json_populate_recordset(null::${sql.table(table)}, ${json}::json)`.execute(trx);
}

function rowText(row: object): string {
  return `{${Object.entries(row)
    .map(([key, value]) => `"${columnName(key)}":${valueText(key, value)}`)
    .join(',')}}`;
}

function valueText(key: string, value: unknown): string {
  if (value === null || value === undefined) return 'null';
  if (JSON_COLUMNS.has(key)) return String(value);
  // PostgreSQL's hex form of bytea.
  if (Buffer.isBuffer(value)) return `"\\\\x${value.toString('hex')}"`;
  return JSON.stringify(value);
}

function columnName(key: string): string {
  const known = columnNames.get(key);
  if (known !== undefined) return known;
  const name = key.replace(/[A-Z]/g, (letter) => `_${letter.toLowerCase()}`);
  columnNames.set(key, name);
  return name;
}
