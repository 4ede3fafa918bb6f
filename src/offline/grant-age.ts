import type { Clock } from './outbox-keys.ts';

/** A clock that stands this far before the last contact has been set back. */
const SET_BACK_MS = 120_000;

/** By the corrected clock; a clock that was set back counts as lapsed. @param expiresAt ms since 1970 */
export function hasLapsed(expiresAt: number, clock: Clock | undefined, now: Date): boolean {
  const corrected = now.getTime() + (clock?.offsetMs ?? 0);
  const contact = clock?.lastContact ?? null;
  const setBack = contact !== null && corrected < new Date(contact).getTime() - SET_BACK_MS;
  return setBack || corrected >= expiresAt;
}
