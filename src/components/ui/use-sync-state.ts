import { useSyncExternalStore } from 'react';
import type { SyncState } from '#offline/sync-state.ts';
import { useStation } from './station-context.ts';

export function useSyncState(): SyncState {
  const { sync } = useStation();
  return useSyncExternalStore(sync.state.subscribe, sync.state.getSnapshot);
}
