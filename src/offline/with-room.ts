import { isDiskFull } from './disk-error.ts';
import { forgetSent } from './forget-sent.ts';
import { freeHistory, freeUnneeded } from './free-cache.ts';
import { RecordError } from './record-error.ts';
import { reopening } from './reopening.ts';
import type { Station } from './station.ts';

/** No room, even without what can be pulled again; the message says what to do. */
export class NoRoomError extends RecordError {
  override name = 'NoRoomError';
}

type Freeing = (station: Station, now: Date) => Promise<void>;

/** What can be had again goes first; what was not sent never goes. */
const IN_TURN: readonly Freeing[] = [freeHistory, freeUnneeded, forgetSent];

/**
 * Writes to the outbox. On a full device it frees what can be pulled again, then what was sent long ago, and tries anew
 * after each; a lost connection is opened again. `write` is one transaction: it is written whole or not at all.
 * @throws NoRoomError
 * @throws LostDatabaseError
 */
export function withRoom<T>(station: Station, now: Date, write: () => PromiseLike<T>): Promise<T> {
  return tryWrite(station, now, write, IN_TURN);
}

async function tryWrite<T>(
  station: Station,
  now: Date,
  write: () => PromiseLike<T>,
  [free, ...others]: readonly Freeing[],
): Promise<T> {
  try {
    return await reopening([station.outbox, station.cache], write);
  } catch (error) {
    if (!isDiskFull(error)) throw error;
    if (free === undefined) {
      const what =
        'Not saved: this device is full. Delete something else on it and save again. What was saved is safe.';
      throw new NoRoomError(what, { cause: error });
    }
    // A freeing that fails frees nothing; the next one may.
    await free(station, now).catch(() => undefined);
    return tryWrite(station, now, write, others);
  }
}
