import { type SqlBool, sql } from 'kysely';
import type { ShopTransaction } from '#server/db/in-shop.ts';

/** One parameter, however many there are; a list of parameters takes longer to compile and parse than to look up. */
export function among(column: string, ids: Iterable<string>) {
  return sql<SqlBool>`${sql.ref(column)} = any(${[...ids]}::uuid[])`;
}

/** Which of the ids each table has, in one statement for all tables. */
export async function readIds<T extends string>(
  trx: ShopTransaction,
  shopId: string,
  asked: readonly (readonly [T, ReadonlySet<string>])[],
): Promise<Map<T, Set<string>>> {
  const found = new Map<T, Set<string>>(asked.map(([table]) => [table, new Set()]));
  const parts = asked
    .filter(([, ids]) => ids.size > 0)
    .map(
      ([table, ids]) => sql`
        select ${sql.lit(table)} as name, id from ${sql.table(table)} where shop_id = ${shopId} and ${among('id', ids)}`,
    );
  if (parts.length === 0) return found;
  const { rows } = await sql<{ name: T; id: string }>`${sql.join(parts, sql` union all `)}`.execute(trx);
  for (const { name, id } of rows) found.get(name)?.add(id);
  return found;
}
