import { useState } from 'react';
import { Choices } from '#components/ui/Choices.tsx';
import { Strip } from '#components/ui/Strip.tsx';
import type { SheetProps } from './ActSheet.tsx';
import { Problem } from './Problem.tsx';
import { SheetTop } from './SheetTop.tsx';
import { useRecord } from './use-record.ts';

const LIGHTS = ['Daylight D65', 'Shop light', 'Warm light'].map((name) => ({ value: name, name }));

/** The drawdown was compared by eye: under which light; it releases the whole batch. */
export function ReleaseSheet({ tub, onClose, onDone }: SheetProps) {
  const recorder = useRecord(onDone);
  const [light, setLight] = useState<string | null>(null);
  const { batchId } = tub;
  return (
    <>
      <SheetTop title="Release" tub={tub} onClose={onClose} />
      <div className="stack tablet:max-w-[640px] gap-4">
        <Strip lab={tub.lab} hiding={tub.hiding} size="l" />
        <p>Draw down on the garment, cure, compare.</p>
        <h2>Colour is right under</h2>
        <Choices label="Light" options={LIGHTS} value={light} onChoose={setLight} />
      </div>
      <div className="dock stack">
        <Problem text={recorder.problem} />
        <button
          type="button"
          className={`key wide ${light === null ? 'log-key' : 'go'}`}
          disabled={light === null || batchId === null || recorder.saving}
          onClick={() => {
            if (light === null || batchId === null) return;
            const release = { light, byEye: true, at: new Date().toISOString() };
            void recorder.record({ type: 'batch-released', body: { batchId, release } }, 'Released.');
          }}
        >
          {light === null ? 'Choose the light to release' : 'Release'}
        </button>
      </div>
    </>
  );
}
