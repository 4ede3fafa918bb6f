import { useEffect, useEffectEvent } from 'react';
import { NO_RUN, readWedge } from './wedge.ts';

/** Hears a wedge scanner anywhere on the page, whatever has the focus. */
export function useWedge(onScan: (text: string) => void): void {
  const scanned = useEffectEvent(onScan);
  useEffect(() => {
    let run = NO_RUN;
    const press = (event: KeyboardEvent) => {
      if (event.ctrlKey || event.metaKey || event.altKey) return;
      const heard = readWedge(run, event.key, event.timeStamp);
      run = heard.run;
      if (heard.scanned === undefined) return;
      event.preventDefault();
      scanned(heard.scanned);
    };
    window.addEventListener('keydown', press, { capture: true });
    return () => window.removeEventListener('keydown', press, { capture: true });
  }, []);
}
