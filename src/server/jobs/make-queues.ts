import { escapeIdentifier } from 'pg';
import PgBoss from 'pg-boss';
import { JOBS_SCHEMA, queues } from './queues.ts';

/** What the application's role does with jobs; what makes and drops queues stays the owner's. */
const RIGHTS = {
  job: 'select, insert, update, delete',
  archive: 'select, insert, update, delete',
  version: 'select, update',
  queue: 'select',
  schedule: 'select',
  subscription: 'select',
} as const;

interface Owner {
  connectionString: string;
  query: (text: string) => Promise<unknown>;
}

/** Brings pg-boss's schema to its version and makes the queues that are missing; of the owner's role, in the migrate step. */
export async function makeQueues({ connectionString, query }: Owner, appRole: string): Promise<void> {
  const settings = { schema: JOBS_SCHEMA, max: 1, supervise: false, schedule: false };
  const boss = new PgBoss({ connectionString, ...settings });
  const failed = new Promise<never>((_, reject) => boss.on('error', reject));
  const made = async () => {
    await boss.start();
    for (const [name, options] of Object.entries(queues)) {
      await boss.createQueue(name, { name, ...options });
      await boss.updateQueue(name, { name, ...options });
    }
    await boss.stop({ graceful: false });
  };
  await Promise.race([made(), failed]);
  const [schema, role] = [JOBS_SCHEMA, appRole].map(escapeIdentifier);
  await query(`grant usage on schema ${schema} to ${role}`);
  for (const [table, rights] of Object.entries(RIGHTS)) await query(`grant ${rights} on ${schema}.${table} to ${role}`);
}
