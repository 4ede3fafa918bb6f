import { useLiveQuery } from 'dexie-react-hooks';
import type { ReactNode } from 'react';
import { isLoaded } from '#offline/shown.ts';
import { useStation } from './station-context.ts';
import { useSyncState } from './use-sync-state.ts';

/** Until the shop has been loaded once, its own step with a count; afterwards nothing stands in the way. */
export function FirstLoad({ children }: { children: ReactNode }) {
  const { station, sync } = useStation();
  const loaded = useLiveQuery(() => isLoaded(station), [station]);
  const state = useSyncState();
  if (loaded === undefined) return null;
  if (loaded) return children;
  const progress = state.loaded;
  const stuck = state.phase === 'offline' || state.phase === 'failed' || state.phase === 'signed-out';
  return (
    <section className="stack my-auto" aria-live="polite">
      <h1>Loading the shop</h1>
      <p className="ink2">Once on this device. Then it works without a network.</p>
      <progress className="h-6 w-full" max={progress?.total ?? 1} value={progress?.done ?? 0} aria-label="Loaded" />
      <p>
        <b className="num">{progress?.done ?? 0}</b> of {progress?.total ?? '…'} rows
        {progress ? `, ${Math.ceil(progress.bytes / 1024)} kB` : ''}
      </p>
      {stuck ? (
        <>
          <p className="badge warn g-warn justify-self-start">
            {state.problem ?? 'No signal. Move to where there is one.'}
          </p>
          <button type="button" className="key" onClick={() => void sync.sendNow()}>
            Try again
          </button>
        </>
      ) : null}
    </section>
  );
}
