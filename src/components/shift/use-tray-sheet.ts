import { useEffect, useState } from 'react';

export interface TraySheet {
  act: 'correct' | 'drop';
  opId: string;
}

/** The decision that is open, in the address (`?correct=…`), so that back and a reload keep to it. */
export function useTraySheet(): { sheet: TraySheet | undefined; open: (sheet: TraySheet) => void; close: () => void } {
  const [sheet, setSheet] = useState(readSheet);
  useEffect(() => {
    const read = () => setSheet(readSheet());
    window.addEventListener('popstate', read);
    return () => window.removeEventListener('popstate', read);
  }, []);
  return {
    sheet,
    open: (next) => {
      history.pushState({ opened: true }, '', `?${next.act}=${next.opId}`);
      setSheet(next);
      window.scrollTo(0, 0);
    },
    close: () => {
      if ((history.state as { opened?: boolean } | null)?.opened === true) history.back();
      else {
        history.replaceState(null, '', location.pathname);
        setSheet(undefined);
      }
    },
  };
}

function readSheet(): TraySheet | undefined {
  const search = new URLSearchParams(location.search);
  for (const act of ['correct', 'drop'] as const) {
    const opId = search.get(act);
    if (opId !== null) return { act, opId };
  }
  return undefined;
}
