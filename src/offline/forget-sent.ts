import type { Station } from './station.ts';

/** Kept this long, so that a server restored from a backup gets back what it lost. */
const KEEP_MS = 14 * 86_400_000;

/** Forgets operations that were sent long ago and whose effect the cache holds. */
export async function forgetSent(station: Station, now: Date): Promise<void> {
  const seq = (await station.cache.meta.get('position'))?.seq ?? 0;
  const before = new Date(now.getTime() - KEEP_MS).toISOString();
  await station.outbox.ops
    .where('status')
    .equals('sent')
    .filter(
      (entry) => entry.sentAt !== null && entry.sentAt < before && entry.changeSeq !== null && entry.changeSeq <= seq,
    )
    .delete();
}
