import { AsyncLocalStorage } from 'node:async_hooks';
import {
  CamelCasePlugin,
  type CompiledQuery,
  type DatabaseConnection,
  Kysely,
  PostgresDialect,
  PostgresDriver,
  type QueryResult,
} from 'kysely';
import pg from 'pg';
import { type Database, MOST_CONNECTIONS, postgresPool } from '#server/db/connection.ts';
import type { DB } from '#server/db/tables.ts';
import type { VirtualTime } from './virtual-time.ts';

/** One request as the server works on it: where it may be held up, and where the database may go away. */
export interface Served {
  /** Rests between the last statement of a transaction and its commit. */
  beforeCommit: () => Promise<void>;
  time: VirtualTime;
}

/** Whom the statements of this asynchronous context belong to. */
export const served = new AsyncLocalStorage<Served>();

export interface SimulatedDatabase {
  db: Database;
  /** True when a statement of this database waits for a lock: nothing goes on by itself. */
  waitsForLock: () => Promise<boolean>;
  /** Breaks the rule that the counter row stays locked up to the commit. */
  releaseCounterAtOnce: (broken: boolean) => void;
  close: () => Promise<void>;
}

/** The application's own pool and dialect, with a place to stop before each commit. */
export function openSimulatedDatabase(url: string): SimulatedDatabase {
  const pool = postgresPool(url, 4 * MOST_CONNECTIONS);
  const watcher = new pg.Pool({ connectionString: url, max: 2 });
  const driver = new SteppedDriver(pool, watcher);
  const dialect = new PostgresDialect({ pool });
  dialect.createDriver = () => driver;
  const db = new Kysely<DB>({ dialect, plugins: [new CamelCasePlugin({ maintainNestedObjectKeys: true })] });
  return {
    db,
    waitsForLock: async () => {
      const found = await watcher.query<{ waiting: string }>(
        `select count(*) as waiting from pg_stat_activity where datname = current_database() and wait_event_type = 'Lock'`,
      );
      return Number(found.rows[0]?.waiting) > 0;
    },
    releaseCounterAtOnce: (broken) => (driver.broken = broken),
    close: async () => {
      await db.destroy();
      await watcher.end();
    },
  };
}

interface Waiter {
  connection: DatabaseConnection;
  time: VirtualTime;
}

/** Knows who holds a shop's counter row and who waits for it, so that whoever waits counts as resting. */
class SteppedDriver extends PostgresDriver {
  broken = false;
  private readonly known = new WeakSet<DatabaseConnection>();
  private holder: DatabaseConnection | undefined;
  private waiters: Waiter[] = [];

  constructor(
    pool: pg.Pool,
    private readonly aside: pg.Pool,
  ) {
    super({ pool });
  }

  override async acquireConnection(): Promise<DatabaseConnection> {
    const connection = await super.acquireConnection();
    if (!this.known.has(connection)) {
      this.known.add(connection);
      const run = connection.executeQuery.bind(connection);
      connection.executeQuery = <R>(query: CompiledQuery) => this.execute<R>(connection, query, run);
    }
    return connection;
  }

  override async commitTransaction(connection: DatabaseConnection): Promise<void> {
    await served.getStore()?.beforeCommit();
    await super.commitTransaction(connection);
    this.handOver(connection);
  }

  override async rollbackTransaction(connection: Parameters<PostgresDriver['rollbackTransaction']>[0]): Promise<void> {
    await super.rollbackTransaction(connection);
    this.handOver(connection);
  }

  private async execute<R>(
    connection: DatabaseConnection,
    query: CompiledQuery,
    run: DatabaseConnection['executeQuery'],
  ): Promise<QueryResult<R>> {
    const request = served.getStore();
    if (request === undefined || !query.sql.startsWith('update "shop_sync"')) return run<R>(query);
    if (this.broken) return this.countAside<R>(query);
    if (this.holder === undefined) this.holder = connection;
    const waiter = { connection, time: request.time };
    if (this.holder !== connection) {
      this.waiters.push(waiter);
      request.time.rest();
    }
    try {
      return await run<R>(query);
    } finally {
      this.comeBack(waiter);
    }
  }

  /** It went on without being handed the lock: it had run into a time-out, or nobody had held it. */
  private comeBack(waiter: Waiter): void {
    if (!this.waiters.includes(waiter)) return;
    this.waiters = this.waiters.filter((other) => other !== waiter);
    waiter.time.resume();
  }

  private handOver(connection: DatabaseConnection): void {
    if (this.holder !== connection) return;
    const next = this.waiters.shift();
    this.holder = next?.connection;
    next?.time.resume();
  }

  /** In a transaction of its own: the number is given, and nothing is held. */
  private async countAside<R>(query: CompiledQuery): Promise<QueryResult<R>> {
    const client = await this.aside.connect();
    try {
      await client.query('begin');
      await client.query(`select set_config('app.shop_id', $1, true)`, [query.parameters.at(-1)]);
      const { rows } = await client.query(query.sql, [...query.parameters]);
      await client.query('commit');
      return { rows: rows.map((row: { seq: string }) => ({ seq: Number(row.seq) })) as R[] };
    } finally {
      client.release();
    }
  }
}
