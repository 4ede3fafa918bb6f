import { CompiledQuery } from 'kysely';
import PgBoss from 'pg-boss';
import type { ShopTransaction } from '#server/db/in-shop.ts';
import { type JobPayload, JOBS_SCHEMA, type QueueName } from './queues.ts';

export interface NewJob {
  queue: QueueName;
  payload: JobPayload;
}

/** The queue is missing: the database was not migrated. */
export class JobError extends Error {
  override name = 'JobError';
}

/** Never started: it words the statements, and each call brings the transaction that sends them. */
const boss = new PgBoss({
  schema: JOBS_SCHEMA,
  db: { executeSql: () => Promise.reject(new JobError('A job is queued inside a transaction only.')) },
});

/** Queues jobs in this transaction, in one statement: they are there when it commits, and only then. @throws JobError */
export async function queueJobs(trx: ShopTransaction, jobs: readonly NewJob[]): Promise<void> {
  if (jobs.length === 0) return;
  let queued = 0n;
  const executeSql = async (text: string, values: unknown[]) => {
    const result = await trx.executeQuery(CompiledQuery.raw(text, values));
    queued += result.numAffectedRows ?? 0n;
    return { rows: result.rows };
  };
  await boss.insert(
    jobs.map(({ queue, payload }) => ({ id: payload.opId, name: queue, data: payload })),
    { db: { executeSql } },
  );
  if (queued !== BigInt(jobs.length))
    throw new JobError(`${queued} of ${jobs.length} jobs were queued: migrate first.`);
}
