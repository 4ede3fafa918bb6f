import { registerSW } from 'virtual:pwa-register';
import type { Station } from './station.ts';
import { Watched } from './sync-state.ts';
import { listWeighings } from './weighings.ts';

/** 'ready': a new version waits to be taken. */
export const updateState = new Watched<'none' | 'ready'>('none');

let take: ((reload?: boolean) => Promise<void>) | undefined;

/** Registers the service worker once for this page. */
export function registerApp(): void {
  take ??= registerSW({ immediate: true, onNeedRefresh: () => updateState.set('ready') });
}

/** Takes the waiting version; refuses while a batch is open, so that no weighing is ever interrupted. */
export async function applyUpdate(station: Station): Promise<void> {
  if ((await listWeighings(station)).length > 0) return;
  await take?.(true);
}
