import { registerSW } from 'virtual:pwa-register';
import type { Station } from './station.ts';
import { syncLock, thisBrowser } from './surroundings.ts';
import { Watched } from './sync-state.ts';
import { type UpdateAnswer, takeUpdate } from './take-update.ts';
import { listWeighings } from './weighings.ts';

/** 'ready': a new version waits to be taken. */
export const updateState = new Watched<'none' | 'ready'>('none');

let take: ((reload?: boolean) => Promise<void>) | undefined;

/** Registers the service worker once for this page. */
export function registerApp(): void {
  take ??= registerSW({ immediate: true, onNeedRefresh: () => updateState.set('ready') });
}

/** Takes the waiting version, unless a batch is open or a sync runs. */
export function applyUpdate(station: Station): Promise<UpdateAnswer> {
  return takeUpdate(async () => take?.(true), {
    weighingIsOpen: async () => (await listWeighings(station)).length > 0,
    alone: (run) => thisBrowser.alone(syncLock(station.installId), run),
  });
}
