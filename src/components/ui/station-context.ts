import { createContext, useContext } from 'react';
import type { Station } from '#offline/station.ts';
import type { SyncHandle } from '#offline/sync-loop.ts';

export interface StationContextValue {
  station: Station;
  sync: SyncHandle;
}
export const StationContext = createContext<StationContextValue | undefined>(undefined);

/** The open station; only inside StationRoot. */
export function useStation(): StationContextValue {
  const value = useContext(StationContext);
  if (value === undefined) throw new Error('useStation is used outside StationRoot.');
  return value;
}
