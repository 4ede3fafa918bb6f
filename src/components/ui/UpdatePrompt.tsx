import { useEffect, useState, useSyncExternalStore } from 'react';
import { useLiveQuery } from 'dexie-react-hooks';
import { applyUpdate, registerApp, updateState } from '#offline/app-update.ts';
import { listWeighings } from '#offline/weighings.ts';
import { useStation } from './station-context.ts';
import { useSyncState } from './use-sync-state.ts';

/** Offers a waiting version; never while a batch is open or logs are on their way. */
export function UpdatePrompt() {
  const { station } = useStation();
  const state = useSyncExternalStore(updateState.subscribe, updateState.getSnapshot);
  const weighings = useLiveQuery(() => listWeighings(station), [station]);
  const busy = useSyncState().phase === 'sending';
  const [asked, setAsked] = useState(false);
  useEffect(() => registerApp(), []);
  if (state !== 'ready' || weighings === undefined || weighings.length > 0 || busy) return null;
  return (
    <div className="note" role="status">
      <span>A new version is ready.</span>
      <button
        type="button"
        className="key"
        disabled={asked}
        onClick={() => {
          setAsked(true);
          void applyUpdate(station).then((answer) => setAsked(answer === 'taken'));
        }}
      >
        Update now
      </button>
    </div>
  );
}
