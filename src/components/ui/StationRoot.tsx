import { type ReactNode, useEffect, useState } from 'react';
import { type Station, openStation } from '#offline/station.ts';
import { type SyncHandle, startSync } from '#offline/sync-loop.ts';
import { keepCodeReader } from './code-reader.ts';
import { FirstLoad } from './FirstLoad.tsx';
import { LapsedNote } from './LapsedNote.tsx';
import { LossNote } from './LossNote.tsx';
import { Nav, type Area } from './Nav.tsx';
import { StationContext } from './station-context.ts';
import { UpdatePrompt } from './UpdatePrompt.tsx';

interface Props {
  area: Area;
  /** Inside a batch the areas go away. */
  flow?: boolean;
  className?: string;
  children: ReactNode;
}

/** The root of every station page: opens the station without a network, keeps it in step, shows the first load. */
export function StationRoot({ area, flow = false, className = '', children }: Props) {
  const open = useOpenStation();
  useEffect(keepCodeReader, []);
  if (open === undefined) return null;
  return (
    <StationContext value={open}>
      <div className={`frame ${flow ? 'flow' : ''} ${className}`}>
        <main>
          {open.station.grant.lapsed ? <LapsedNote /> : null}
          <LossNote />
          <FirstLoad>{children}</FirstLoad>
          <UpdatePrompt />
        </main>
        <Nav area={area} />
      </div>
    </StationContext>
  );
}

function useOpenStation(): { station: Station; sync: SyncHandle } | undefined {
  const [open, setOpen] = useState<{ station: Station; sync: SyncHandle }>();
  useEffect(() => {
    let ended = false;
    let sync: SyncHandle | undefined;
    void openStation().then((station) => {
      if (ended) return;
      if (station === undefined) {
        location.replace(`/sign-in?next=${encodeURIComponent(location.pathname + location.search)}`);
        return;
      }
      sync = startSync(station);
      setOpen({ station, sync });
    });
    return () => {
      ended = true;
      sync?.stop();
    };
  }, []);
  return open;
}
