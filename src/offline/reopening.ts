import type { Dexie } from 'dexie';
import { isConnectionLost } from './disk-error.ts';
import { RecordError } from './record-error.ts';

/** The database stays away; the message says what to do. */
export class LostDatabaseError extends RecordError {
  override name = 'LostDatabaseError';
}

const MOST_REOPENINGS = 3;
/** Longer each time: a browser that restarts its storage process needs a moment. */
const WAIT_MS = 150;

const pause = (ms: number) => new Promise<void>((resolve) => setTimeout(resolve, ms));

/**
 * Runs against these databases; after a lost connection it opens them again and runs once more, three times at most. What
 * `run` writes must be the same when it is written twice: the first time may have reached the disk.
 * @throws LostDatabaseError
 */
export async function reopening<T>(
  databases: readonly Dexie[],
  run: () => PromiseLike<T>,
  wait: (ms: number) => Promise<void> = pause,
): Promise<T> {
  for (let tried = 0; ; tried++) {
    const before = databases.map(timesReopened);
    try {
      return await run();
    } catch (error) {
      if (!isConnectionLost(error) || databases.some((database) => database.hasBeenClosed())) throw error;
      if (tried === MOST_REOPENINGS) {
        const what = 'This browser lost what it keeps. Close all tabs of Halfpail and open it again.';
        throw new LostDatabaseError(what, { cause: error });
      }
      await wait(WAIT_MS * (tried + 1));
      for (const [n, database] of databases.entries())
        if (timesReopened(database) === before[n]) await reopen(database);
    }
  }
}

/** How often each was opened again: who fails because another has just done it does not close it once more. */
const reopened = new WeakMap<Dexie, number>();
const timesReopened = (database: Dexie): number => reopened.get(database) ?? 0;

async function reopen(database: Dexie): Promise<void> {
  // Closed by us meanwhile, on purpose: not to be brought back.
  if (database.hasBeenClosed()) return;
  reopened.set(database, timesReopened(database) + 1);
  database.close({ disableAutoOpen: false });
  // One that cannot be opened yet fails again in the run.
  await database.open().catch(() => undefined);
}
