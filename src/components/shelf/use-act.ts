import { useEffect, useState } from 'react';
import type { Act } from './bucket-acts.ts';

export type SheetAct = Exclude<Act, 'use-up' | 'label'>;
const SHEETS: readonly SheetAct[] = ['issue', 'return', 'reweigh', 'release', 'discard'];

/** The act in the address (`?return`), so that back and a reload keep to it. */
export function useAct(): { act: SheetAct | undefined; open: (act: SheetAct) => void; close: () => void } {
  const [act, setAct] = useState(readAct);
  useEffect(() => {
    const read = () => setAct(readAct());
    window.addEventListener('popstate', read);
    return () => window.removeEventListener('popstate', read);
  }, []);
  return {
    act,
    open: (next) => {
      history.pushState({ opened: true }, '', `?${next}`);
      setAct(next);
      window.scrollTo(0, 0);
    },
    close: () => {
      if ((history.state as { opened?: boolean } | null)?.opened === true) history.back();
      else {
        history.replaceState(null, '', location.pathname);
        setAct(undefined);
      }
    },
  };
}

function readAct(): SheetAct | undefined {
  const search = new URLSearchParams(location.search);
  return SHEETS.find((act) => search.has(act));
}
