import { sql } from 'kysely';
import PgBoss from 'pg-boss';
import { v7 as uuid } from 'uuid';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import type { OperationBody } from '#contract/operation-bodies.ts';
import { inShop } from '#server/db/in-shop.ts';
import { JobError, queueJobs } from '#server/jobs/queue-jobs.ts';
import type { QueueName } from '#server/jobs/queues.ts';
import {
  closePushStation,
  databaseUrl,
  db,
  openPushStation,
  push,
  quarantined,
  record,
  shopId,
} from '#tests/support/push-station.ts';

beforeAll(openPushStation, 120_000);
afterAll(closePushStation);

type Reported = Extract<OperationBody, { type: 'shift-reported' }>;

function report(given: Partial<Reported['body']> = {}): Reported {
  return {
    type: 'shift-reported',
    body: {
      from: '2026-11-30T06:00:00.000Z',
      to: '2026-11-30T14:00:00.000Z',
      batches: 3,
      mixedMg: 2_550_000,
      reusedMg: 400_000,
      discards: 1,
      discardedMg: 90_000,
      openPoints: { waiting: 2, refused: 0, recounts: 1, unreleased: 0, atPress: 4 },
      note: null,
      ...given,
    },
  };
}

async function jobsOf(opId: string): Promise<unknown[]> {
  const found = sql<{ name: string; data: unknown }>`select name, data from pgboss.job where id = ${opId}`;
  return (await found.execute(db)).rows;
}

describe('a shift summary that was handed in', () => {
  test('is kept in the log and queues one job for the e-mail, whose payload is the shop and the entry', async () => {
    const entry = record(report(), 'mixer');
    expect(await push([entry])).toMatchObject([{ outcome: 'accepted' }]);
    expect(await jobsOf(entry.opId)).toEqual([{ name: 'shift-report', data: { shopId, opId: entry.opId } }]);
    const kept = await inShop(db, shopId, (trx) =>
      trx.selectFrom('operations').select('envelope').where('opId', '=', entry.opId).executeTakeFirst(),
    );
    expect(kept?.envelope).toMatchObject({ body: report().body });
  });

  test('queues nothing when it is sent again', async () => {
    const entry = record(report(), 'manager');
    await push([entry]);
    expect(await push([entry, entry])).toMatchObject([{ outcome: 'duplicate' }, { outcome: 'duplicate' }]);
    expect(await jobsOf(entry.opId)).toHaveLength(1);
  });

  test('is refused to those who do not mix, and when it ends before it begins; then no job is queued', async () => {
    const [press, backwards] = [record(report(), 'operator'), record(report({ to: report().body.from }), 'mixer')];
    expect((await push([press, backwards])).map(({ outcome }) => outcome)).toEqual(['rejected', 'rejected']);
    expect([await quarantined(press.opId), await quarantined(backwards.opId)]).toEqual([['wrong-role'], ['span']]);
    expect([...(await jobsOf(press.opId)), ...(await jobsOf(backwards.opId))]).toEqual([]);
  });
});

describe('jobs', () => {
  const job = (queue = 'shift-report') => ({ queue: queue as QueueName, payload: { shopId, opId: uuid() } });

  test('are not there when their transaction rolls back', async () => {
    const [lost, kept] = [job(), job()];
    const failing = inShop(db, shopId, async (trx) => {
      await queueJobs(trx, [lost]);
      throw new Error('the push fails after its job was queued');
    });
    await expect(failing).rejects.toThrow('after its job was queued');
    await inShop(db, shopId, (trx) => queueJobs(trx, [kept]));
    expect([await jobsOf(lost.payload.opId), await jobsOf(kept.payload.opId)]).toMatchObject([[], [{}]]);
  });

  test('fail the push when their queue is missing', async () => {
    const queueing = inShop(db, shopId, (trx) => queueJobs(trx, [job(), job('no-such-queue')]));
    await expect(queueing).rejects.toThrow(JobError);
  });

  test("are fetched and completed by the application's role, which can make no queue", async () => {
    const waiting = job();
    await inShop(db, shopId, (trx) => queueJobs(trx, [waiting]));
    const boss = new PgBoss({
      connectionString: databaseUrl(),
      max: 1,
      migrate: false,
      supervise: false,
      schedule: false,
    });
    await boss.start();
    try {
      const fetched = await boss.fetch<{ opId: string }>('shift-report', { batchSize: 100 });
      expect(fetched.map(({ data }) => data.opId)).toContain(waiting.payload.opId);
      await boss.complete('shift-report', waiting.payload.opId);
      expect(await boss.getJobById('shift-report', waiting.payload.opId)).toMatchObject({ state: 'completed' });
      await expect(boss.createQueue('another')).rejects.toThrow('permission denied');
    } finally {
      await boss.stop({ graceful: false });
    }
  });
});
