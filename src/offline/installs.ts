import * as z from 'zod/mini';

const pointer = z.object({
  /** Shop id → install id: every shop that this browser has worked for. */
  installs: z.record(z.string(), z.string()),
  current: z.nullable(z.object({ shopId: z.string(), installId: z.string() })),
});
export type Installs = z.infer<typeof pointer>;

const KEY = 'halfpail.installs';
const NONE: Installs = { installs: {}, current: null };

/** Which databases this browser has, and which is in use. */
export function readInstalls(storage: Storage): Installs {
  const text = storage.getItem(KEY);
  if (text === null) return NONE;
  try {
    return pointer.parse(JSON.parse(text));
  } catch {
    // A damaged pointer is like none: a sign-in finds the install again by its cookie.
    return NONE;
  }
}

export function enterInstall(storage: Storage, shopId: string, installId: string): void {
  const { installs } = readInstalls(storage);
  const next: Installs = { installs: { ...installs, [shopId]: installId }, current: { shopId, installId } };
  storage.setItem(KEY, JSON.stringify(next));
}

export function leaveInstall(storage: Storage): void {
  storage.setItem(KEY, JSON.stringify({ ...readInstalls(storage), current: null }));
}
