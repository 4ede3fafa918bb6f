import type { LostInstall } from '#contract/station-report.ts';
import { findKey } from './outbox-keys.ts';
import { reopening } from './reopening.ts';
import type { Station } from './station.ts';

/** What a person at this station should know of the device itself. */
export interface DeviceNotes {
  /** What the browser cleared before the last sign-in. */
  lost: LostInstall[];
  clockJump: { at: string; jumpMs: number } | undefined;
  /** Rows were given up on a full disk, and have not come back yet. */
  wasFull: boolean;
}

export async function readDeviceNotes({ outbox, cache }: Station): Promise<DeviceNotes> {
  return reopening([outbox, cache], async () => {
    const position = await cache.meta.get('position');
    return {
      lost: (await findKey(outbox, 'lost')) ?? [],
      clockJump: await findKey(outbox, 'clockJump'),
      wasFull: position !== undefined && position.completeAt !== null && position.cursor === '',
    };
  });
}

/** A person has read it. */
export async function dismissNote({ outbox }: Station, note: 'lost' | 'clockJump'): Promise<void> {
  await reopening([outbox], () => outbox.keys.delete(note));
}

/** True when the browser said that it keeps what lies on this device; undefined: it does not tell. */
export async function isKept(
  storage: StorageManager | undefined = globalThis.navigator?.storage,
): Promise<boolean | undefined> {
  return storage?.persisted?.();
}

/** Asks the browser not to clear it; most grant it to an app that is installed or used often. */
export async function askToKeep(
  storage: StorageManager | undefined = globalThis.navigator?.storage,
): Promise<boolean | undefined> {
  return storage?.persist?.();
}
