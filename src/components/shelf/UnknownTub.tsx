import { SyncChip } from '#components/ui/SyncChip.tsx';
import { Top } from '#components/ui/Top.tsx';
import { WrongCode } from '#components/ui/WrongCode.tsx';
import type { Row } from '#contract/rows.ts';
import { codeInPath } from './code-in-path.ts';

/** A code that leads to no tub: which rule it breaks, what it may have meant, and the way to try again. */
export function UnknownTub({ wrong }: { wrong: { problem: string; near: Row<'buckets'> | undefined } }) {
  const typed = codeInPath(location.pathname).toUpperCase().slice(0, 20);
  return (
    <>
      <Top title={typed} back={{ href: '/shelf', label: 'Back to the Shelf' }}>
        <SyncChip />
      </Top>
      <WrongCode {...wrong} />
      <div className="dock stack">
        <a className="key go wide" href="/scan">
          Scan again
        </a>
        <a className="key wide" href="/shelf">
          Look on the shelf
        </a>
      </div>
    </>
  );
}
