import { useEffect, useMemo, useState } from 'react';
import { StationRoot } from '#components/ui/StationRoot.tsx';
import { SyncChip } from '#components/ui/SyncChip.tsx';
import { Top } from '#components/ui/Top.tsx';
import { type FoundTub, findTub } from '#components/ui/find-tub.ts';
import { useShelf } from '#components/ui/use-shelf.ts';
import type { Row } from '#contract/rows.ts';
import { CameraView } from './CameraView.tsx';
import { CodeBox } from './CodeBox.tsx';
import { useWedge } from './use-wedge.ts';

/** A tub by camera, by wedge scanner or by its typed code. */
export function ScanPage() {
  return (
    <StationRoot area="bench" flow className="scan">
      <Scan />
    </StationRoot>
  );
}

function Scan() {
  const shelf = useShelf();
  const [text, setText] = useState('');
  /** The code that was last asked for; answered as soon as the shelf has been read from the disk. */
  const [asked, setAsked] = useState<string>();
  const found = useMemo(
    () => (asked === undefined || shelf === undefined ? undefined : answerTo(asked, shelf)),
    [asked, shelf],
  );
  useEffect(() => {
    if (found === undefined || !('tub' in found)) return;
    navigator.vibrate?.(60);
    location.assign(`/b/${found.tub.code}`);
  }, [found]);
  const openScanned = (code: string) => {
    setText(code.slice(0, 80));
    setAsked(code);
  };
  useWedge(openScanned);
  return (
    <>
      <Top title="Scan" back={{ href: '/', label: 'Back to the Bench' }}>
        <SyncChip />
      </Top>
      <div className="scan-cols">
        <CameraView onText={openScanned} />
        <CodeBox
          text={text}
          wrong={found !== undefined && 'problem' in found ? found : undefined}
          onOpen={() => setAsked(text)}
          onText={(next) => {
            setText(next);
            setAsked(undefined);
          }}
        />
      </div>
    </>
  );
}

function answerTo(code: string, shelf: readonly Row<'buckets'>[]): FoundTub {
  if (code.trim() === '') return { problem: 'Type the 8 characters of the code.', near: undefined };
  return findTub(code, shelf);
}
