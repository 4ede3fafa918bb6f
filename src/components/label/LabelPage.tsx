import { useLiveQuery } from 'dexie-react-hooks';
import { useState } from 'react';
import { StationRoot } from '#components/ui/StationRoot.tsx';
import { SyncChip } from '#components/ui/SyncChip.tsx';
import { Top } from '#components/ui/Top.tsx';
import { useStation } from '#components/ui/station-context.ts';
import { readBucketByCode } from '#offline/shown.ts';
import { Copies } from './Copies.tsx';
import { Label } from './Label.tsx';
import { LABEL_SIZES, type LabelSize } from './label-content.ts';
import { PrintSheet } from './PrintSheet.tsx';
import { useLabelContent } from './use-label-content.ts';

/** The label of one tub: preview, size, copies, print. */
export function LabelPage() {
  return (
    <StationRoot area="shelf" flow>
      <TubLabel />
    </StationRoot>
  );
}

function TubLabel() {
  const { station } = useStation();
  const search = new URLSearchParams(location.search);
  const code = (search.get('tub') ?? '').toUpperCase();
  const bucket = useLiveQuery(async () => (await readBucketByCode(station, code)) ?? null, [station, code]);
  const content = useLabelContent(bucket ?? undefined);
  const [size, setSize] = useState<LabelSize>('l102');
  const [copies, setCopies] = useState(1);
  const back = { href: search.has('new') ? '/' : `/b/${code}`, label: 'Back' };
  if (bucket === null) {
    return (
      <>
        <Top title="Label" back={{ href: '/shelf', label: 'Back to the Shelf' }} />
        <p>No such tub on this device. Scan it again.</p>
      </>
    );
  }
  if (content === undefined) return null;
  return (
    <>
      <Top title="Label" back={back}>
        <SyncChip />
      </Top>
      {search.has('new') ? <p className="g g-ok">Saved on this device. Put the label on the side of the tub.</p> : null}
      <div className="label-cols stack gap-4">
        <div className="stage">
          <Label content={content} size={size} />
          <p className="small ink2">Use film and a resin ribbon. Direct thermal paper fades.</p>
        </div>
        <div className="stack gap-4">
          <div className="sizes" role="radiogroup" aria-label="Size in mm">
            {LABEL_SIZES.map((entry) => (
              <button
                key={entry.size}
                type="button"
                role="radio"
                aria-checked={entry.size === size}
                className="key px-1"
                onClick={() => setSize(entry.size)}
              >
                {entry.name}
              </button>
            ))}
          </div>
          <Copies copies={copies} onCopies={setCopies} />
          <a className="key wide" href={`/b/${code}`}>
            Open this tub
          </a>
        </div>
      </div>
      <div className="dock">
        <button type="button" className="key go wide" onClick={() => window.print()}>
          Print {copies === 1 ? '1 label' : `${copies} labels`}
        </button>
      </div>
      <PrintSheet content={content} size={size} copies={copies} />
    </>
  );
}
