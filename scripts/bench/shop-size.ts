import pg from 'pg';

interface TableSize {
  name: string;
  rows: number;
  bytes: number;
}

/** Prints what the logs of a shop take in PostgreSQL: rows of each table, bytes with indexes, and both per log. */
export async function sayShopSize(superuserUrl: string): Promise<void> {
  const client = new pg.Client({ connectionString: superuserUrl });
  await client.connect();
  await client.query('vacuum analyze');
  const { rows } = await client.query<TableSize>(
    `select relname as name, n_live_tup::int as rows, pg_total_relation_size(relid)::float8 as bytes
     from pg_stat_user_tables where schemaname = 'public' order by bytes desc`,
  );
  await client.end();
  const logs = rows.find(({ name }) => name === 'operations')?.rows ?? Number.NaN;
  const all = rows.reduce((sum, table) => ({ name: '', rows: sum.rows + table.rows, bytes: sum.bytes + table.bytes }));
  console.log(
    `${logs} logs take ${all.rows} rows and ${mega(all.bytes)} MB with indexes: ${(all.rows / logs).toFixed(1)} rows and ${(all.bytes / logs / 1000).toFixed(2)} kB a log`,
  );
  for (const { name, rows: count, bytes } of rows.slice(0, 8))
    console.log(`  ${name}: ${count} rows, ${mega(bytes)} MB, ${(bytes / Math.max(1, count)).toFixed(0)} bytes a row`);
}

const mega = (bytes: number) => (bytes / 1e6).toFixed(1);
