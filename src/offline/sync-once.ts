import { signInResponse } from '#contract/sign-in.ts';
import { clearCache } from './clear-cache.ts';
import { forgetSent } from './forget-sent.ts';
import { type LoadProgress, pullChanges } from './pull-changes.ts';
import { pushOutbox } from './push-outbox.ts';
import { type Browser, type Station, saveSignIn } from './station.ts';
import type { SyncDeps, SyncResult } from './sync-result.ts';

/**
 * One run: send what waits, then fetch what changed; a 401 is answered by one renewal, and the queue is kept. A station
 * that was revoked forgets the shop's rows, whichever of its requests is told so.
 */
export async function syncOnce(
  station: Station,
  deps: SyncDeps,
  onProgress: (progress: LoadProgress) => void,
  browser?: Browser,
): Promise<SyncResult> {
  const first = await exchange(station, deps, onProgress);
  const again = first.kind === 'signed-out' && (await renew(station, deps, browser));
  const result = again ? await exchange(station, deps, onProgress) : first;
  if (result.kind === 'refused' && result.revoked) await clearCache(station.cache);
  return result;
}

async function exchange(
  station: Station,
  deps: SyncDeps,
  onProgress: (progress: LoadProgress) => void,
): Promise<SyncResult> {
  const pushed = await pushOutbox(station, deps);
  if (pushed.kind !== 'done' && pushed.kind !== 'held') return pushed;
  const pulled = await pullChanges(station, deps, onProgress);
  if (pulled.kind !== 'done') return pulled;
  await forgetSent(station, deps.now());
  return pushed;
}

/** A live session gives a fresh grant and station credential; the person at work goes on under the new grant. */
async function renew(station: Station, deps: SyncDeps, browser: Browser | undefined): Promise<boolean> {
  const response = await deps
    .fetch(`/api/auth/renew?install=${station.installId}`, { method: 'POST' })
    .catch(() => undefined);
  if (response === undefined || !response.ok) return false;
  const answer = signInResponse.safeParse(await response.json().catch(() => undefined));
  if (!answer.success || answer.data.install.id !== station.installId) return false;
  const renewed = await saveSignIn(answer.data, browser);
  if (renewed.person.id === station.person.id) station.grant = renewed.grant;
  renewed.outbox.close();
  return true;
}
