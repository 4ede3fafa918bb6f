import { isDiskFull } from './disk-error.ts';
import { type Clock, findKey, putKey } from './outbox-keys.ts';
import type { Outbox } from './outbox.ts';

/** A clock that differs by more from what it was at the contact before has jumped. */
const JUMP_MS = 120_000;

/** How far the device's clock jumped between two contacts, ms; ahead is positive; undefined: it did not. */
export function clockJump(before: Clock | undefined, after: Clock): number | undefined {
  if (before === undefined || before.lastContact === null) return undefined;
  const jumpMs = before.offsetMs - after.offsetMs;
  const unsure = before.uncertaintyMs + after.uncertaintyMs;
  return Math.abs(jumpMs) - unsure > JUMP_MS ? jumpMs : undefined;
}

/** Keeps what a contact told of the clock, and a jump until a person has read it. */
export async function keepClock(outbox: Outbox, after: Clock): Promise<void> {
  await outbox.transaction('rw', outbox.keys, async () => {
    const jumpMs = clockJump(await findKey(outbox, 'clock'), after);
    if (jumpMs !== undefined && after.lastContact !== null)
      await putKey(outbox, 'clockJump', { at: after.lastContact, jumpMs });
    await putKey(outbox, 'clock', after);
  });
}

/** The server's clock lies inside the exchange: half of it is the uncertainty. On a full disk the last measure stays. */
export async function measureClock(outbox: Outbox, serverTime: string, sentAt: Date, now: Date): Promise<void> {
  const half = (now.getTime() - sentAt.getTime()) / 2;
  const offsetMs = Math.round(new Date(serverTime).getTime() - (sentAt.getTime() + half));
  const after = { offsetMs, uncertaintyMs: Math.ceil(Math.abs(half)), lastContact: serverTime };
  await keepClock(outbox, after).catch((error: unknown) => {
    if (!isDiskFull(error)) throw error;
  });
}
