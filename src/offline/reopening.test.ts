import { v7 as uuidv7 } from 'uuid';
import { Dexie } from 'dexie';
import { expect, test } from 'vitest';
import { relocated } from '#tests/support/operations.ts';
import { makeStation, START } from '#tests/support/station.ts';
import { isConnectionLost, isDiskFull } from './disk-error.ts';
import { recordOperation } from './record-operation.ts';
import { LostDatabaseError, reopening } from './reopening.ts';
import { readQueue } from './shown.ts';

const deps = { now: () => START, randomId: uuidv7 };
const noWait = async () => {};
const lost = (name: string, message = 'gone') => new DOMException(message, name);

/** Fails so often, then gives 'done'. */
function failing(times: number, error: unknown) {
  const run = async () => {
    run.calls += 1;
    if (run.calls <= times) throw error;
    return 'done';
  };
  run.calls = 0;
  return run;
}

async function openDatabase(): Promise<Dexie> {
  const database = new Dexie(`test-${uuidv7()}`);
  database.version(1).stores({ rows: '&id' });
  return database.open();
}

test.each([
  lost('UnknownError', 'Connection to Indexed Database server lost. Refresh the page to try again'),
  lost('InvalidStateError'),
  lost('AbortError'),
  new Dexie.DatabaseClosedError('closed'),
  Object.assign(new Dexie.OpenFailedError('not opened'), { inner: lost('UnknownError') }),
])('after a lost connection (%s) the database is opened again and the work goes on', async (error) => {
  const database = await openDatabase();
  const before = database.backendDB();
  const run = failing(1, error);
  expect(await reopening([database], run, noWait)).toBe('done');
  expect(database.isOpen()).toBe(true);
  expect(database.backendDB()).not.toBe(before);
});

test('it opens three times, waiting longer each time, then says what to do', async () => {
  const database = await openDatabase();
  const waits: number[] = [];
  const wait = async (ms: number) => void waits.push(ms);
  expect(await reopening([database], failing(3, lost('UnknownError')), wait)).toBe('done');
  expect(waits).toEqual([150, 300, 450]);
  const run = failing(4, lost('UnknownError'));
  await expect(reopening([database], run, wait)).rejects.toThrow(LostDatabaseError);
  await expect(reopening([database], failing(9, lost('UnknownError')), wait)).rejects.toThrow('Close all tabs');
  expect(run.calls).toBe(4);
});

test('another error is not tried again', async () => {
  const database = await openDatabase();
  const run = failing(1, lost('ConstraintError'));
  await expect(reopening([database], run, noWait)).rejects.toThrow('gone');
  expect(run.calls).toBe(1);
});

test('a database that was closed on purpose stays closed', async () => {
  const database = await openDatabase();
  const work = () => database.table('rows').toArray();
  database.close();
  await expect(reopening([database], work, noWait)).rejects.toThrow(Dexie.DatabaseClosedError);
  expect(database.isOpen()).toBe(false);
});

test('three that lose the connection together open it once', async () => {
  const database = await openDatabase();
  let opened = 0;
  database.on('ready', () => void (opened += 1), true);
  await database.table('rows').count();
  opened = 0;
  await Promise.all([1, 2, 3].map(() => reopening([database], failing(1, lost('UnknownError')), noWait)));
  expect(opened).toBe(1);
});

test('an entry whose write reached the disk and whose answer was lost is there once', async () => {
  const station = await makeStation();
  const { outbox } = station;
  const transact = outbox.transaction.bind(outbox) as (...words: unknown[]) => Promise<unknown>;
  let lose = true;
  Object.assign(outbox, {
    transaction: async (...words: unknown[]) => {
      const done = await transact(...words);
      if (!lose) return done;
      lose = false;
      throw lost('UnknownError', 'Connection to Indexed Database server lost.');
    },
  });
  const { opId } = await recordOperation(station, relocated(uuidv7()), deps);
  expect((await readQueue(station)).waiting.map((entry) => [entry.opId, entry.deviceSeq])).toEqual([[opId, 1]]);
});

test('a connection that the browser closed by force is opened again when an entry is recorded', async () => {
  const station = await makeStation();
  station.outbox.backendDB().close();
  const { opId } = await recordOperation(station, relocated(uuidv7()), deps);
  expect((await readQueue(station)).waiting.map((entry) => entry.opId)).toEqual([opId]);
});

test('a full disk is not a lost connection, whichever way it is told', () => {
  const full = lost('QuotaExceededError');
  const atCommit = Object.assign(new Dexie.AbortError('aborted'), { inner: full });
  for (const error of [full, atCommit]) {
    expect(isDiskFull(error)).toBe(true);
    expect(isConnectionLost(error)).toBe(false);
  }
  expect(isDiskFull(lost('UnknownError'))).toBe(false);
});
