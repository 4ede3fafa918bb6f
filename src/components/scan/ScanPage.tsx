import { useEffect, useState } from 'react';
import { StationRoot } from '#components/ui/StationRoot.tsx';
import { SyncChip } from '#components/ui/SyncChip.tsx';
import { Top } from '#components/ui/Top.tsx';
import { type FoundTub, findTub } from '#components/ui/find-tub.ts';
import { useShelf } from '#components/ui/use-shelf.ts';
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
  const [wrong, setWrong] = useState<Exclude<FoundTub, { tub: unknown }>>();
  /** A code that came before the shelf was read from the disk. */
  const [early, setEarly] = useState<string>();
  const open = (code: string) => {
    if (shelf === undefined) return setEarly(code);
    if (code.trim() === '') return setWrong({ problem: 'Type the 8 characters of the code.', near: undefined });
    const found = findTub(code, shelf);
    if (!('tub' in found)) return setWrong(found);
    navigator.vibrate?.(60);
    location.assign(`/b/${found.tub.code}`);
  };
  const openScanned = (code: string) => {
    setText(code.slice(0, 80));
    open(code);
  };
  useWedge(openScanned);
  useEffect(() => {
    if (shelf === undefined || early === undefined) return;
    setEarly(undefined);
    open(early);
  });
  return (
    <>
      <Top title="Scan" back={{ href: '/', label: 'Back to the Bench' }}>
        <SyncChip />
      </Top>
      <div className="scan-cols">
        <CameraView onText={openScanned} />
        <CodeBox
          text={text}
          wrong={wrong}
          onOpen={() => open(text)}
          onText={(next) => {
            setText(next);
            setWrong(undefined);
          }}
        />
      </div>
    </>
  );
}
