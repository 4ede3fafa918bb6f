import { execFile } from 'node:child_process';
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { promisify } from 'node:util';
import pg from 'pg';
import { afterAll, beforeAll, expect, inject, test } from 'vitest';
import { recordOperation, takeBucketCode } from '#offline/record-operation.ts';
import { readBatches, readRows, readShelf } from '#offline/shown.ts';
import { syncOnce } from '#offline/sync-once.ts';
import { dropDatabase, ensureDatabase } from '#scripts/databases.mjs';
import { startNewEpoch } from '#scripts/start-new-epoch.mjs';
import { requirePostgresPrograms } from '#scripts/postgres-programs.mjs';
import { batchMixed, fresh } from '#tests/support/operations.ts';
import { openDemoStation } from './demo-station.ts';

const run = promisify(execFile);
const programs = requirePostgresPrograms();
const folder = mkdtempSync(path.join(tmpdir(), 'halfpail-backup-'));

let demo: Awaited<ReturnType<typeof openDemoStation>>;
beforeAll(async () => {
  demo = await openDemoStation();
}, 120_000);
afterAll(async () => {
  await demo?.close();
  rmSync(folder, { recursive: true });
});

const sync = () => syncOnce(demo.station, demo.deps, () => {});
const name = () => new URL(demo.database.appUrl).pathname.slice(1);
const asSuperuser = () => Object.assign(new URL(inject('clusterUrl')), { pathname: `/${name()}` }).href;

async function mixBatches(count: number): Promise<void> {
  const { station } = demo;
  const [formula] = await readRows(station, 'formulas');
  const [container] = await readRows(station, 'containers');
  const [component] = await readRows(station, 'components');
  for (let n = 0; n < count; n++) {
    const mixed = batchMixed([{ ...fresh(component?.id ?? '', 400_000), actorId: station.person.id }]);
    Object.assign(mixed.body, { formulaId: formula?.id, revision: formula?.revisions[0]?.revision });
    for (const tub of mixed.body.filled)
      Object.assign(tub, { containerId: container?.id, code: await takeBucketCode(station) });
    await recordOperation(station, mixed);
  }
}

/** How often the server's log has each operation of this station. */
async function storedOperations(): Promise<Map<string, number>> {
  const client = new pg.Client({ connectionString: asSuperuser() });
  await client.connect();
  const { rows } = await client.query<{ op_id: string; n: number }>(
    'select op_id, count(*)::int as n from operations where install_id = $1 group by op_id',
    [demo.station.installId],
  );
  await client.end();
  return new Map(rows.map(({ op_id, n }) => [op_id, n]));
}

test('a backup is restored: what was written after it comes back from the stations, once', async () => {
  const { station } = demo;
  expect(await sync()).toEqual({ kind: 'done' });
  await mixBatches(5);
  expect(await sync()).toEqual({ kind: 'done' });
  const backup = path.join(folder, 'shop.dump');
  await run(path.join(programs, 'pg_dump'), ['--format=custom', `--file=${backup}`, asSuperuser()]);

  await mixBatches(7);
  expect(await sync()).toEqual({ kind: 'done' });
  // And two more that never reached it.
  await mixBatches(2);
  const before = { tubs: await readShelf(station), batches: await readBatches(station) };
  expect((await storedOperations()).size).toBe(12);

  await dropDatabase(inject('clusterUrl'), name());
  await ensureDatabase(inject('clusterUrl'), name());
  await run(path.join(programs, 'pg_restore'), ['--exit-on-error', `--dbname=${asSuperuser()}`, backup]);
  expect((await storedOperations()).size).toBe(5);
  expect(await startNewEpoch(demo.database.ownerUrl)).toBe(2);

  expect(await sync()).toEqual({ kind: 'done' });
  expect(await sync()).toEqual({ kind: 'done' });
  const stored = await storedOperations();
  expect(stored.size).toBe(14);
  expect([...stored.values()].every((n) => n === 1)).toBe(true);
  expect((await station.outbox.ops.toArray()).map(({ status }) => status)).toEqual(Array(14).fill('sent'));
  const balances = (tubs: typeof before.tubs) => new Map(tubs.map(({ id, balanceMg }) => [id, balanceMg]));
  expect(balances(await readShelf(station))).toEqual(balances(before.tubs));
  expect((await readBatches(station)).length).toBe(before.batches.length);
});
