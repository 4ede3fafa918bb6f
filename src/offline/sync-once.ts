import { signInResponse } from '#contract/sign-in.ts';
import { type LoadProgress, pullChanges } from './pull-changes.ts';
import { pushOutbox } from './push-outbox.ts';
import { type Station, saveSignIn } from './station.ts';
import type { SyncDeps, SyncResult } from './sync-result.ts';

/** One run: send what waits, then fetch what changed; a lapsed credential is renewed once. */
export async function syncOnce(
  station: Station,
  deps: SyncDeps,
  onProgress: (progress: LoadProgress) => void,
): Promise<SyncResult> {
  const result = await exchange(station, deps, onProgress);
  if (result.kind !== 'signed-out' || !(await renew(station, deps))) return result;
  return exchange(station, deps, onProgress);
}

async function exchange(
  station: Station,
  deps: SyncDeps,
  onProgress: (progress: LoadProgress) => void,
): Promise<SyncResult> {
  const pushed = await pushOutbox(station, deps);
  return pushed.kind === 'done' ? pullChanges(station, deps, onProgress) : pushed;
}

/** A live session gives a fresh grant and station credential. */
async function renew(station: Station, deps: SyncDeps): Promise<boolean> {
  const response = await deps
    .fetch(`/api/auth/renew?install=${station.installId}`, { method: 'POST' })
    .catch(() => undefined);
  if (response === undefined || !response.ok) return false;
  const answer = signInResponse.safeParse(await response.json().catch(() => undefined));
  if (!answer.success) return false;
  await saveSignIn(answer.data);
  return true;
}
