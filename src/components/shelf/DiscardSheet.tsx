import { useState } from 'react';
import { Choices } from '#components/ui/Choices.tsx';
import { Mass } from '#components/ui/Mass.tsx';
import type { SheetProps } from './ActSheet.tsx';
import { Problem } from './Problem.tsx';
import { SheetTop } from './SheetTop.tsx';
import { useRecord } from './use-record.ts';

const REASONS = ['Contaminated', 'Past use-by', 'Dried or gelled', 'Nobody knows what', 'Other'].map((name) => ({
  value: name,
  name,
}));

/** Ink that leaves for good: asked with its reason, because there is no way back. */
export function DiscardSheet({ tub, onClose, onDone }: SheetProps) {
  const recorder = useRecord(onDone);
  const [reason, setReason] = useState<string | null>(null);
  const [note, setNote] = useState('');
  const missing = reason === 'Other' && note.trim() === '';
  const ready = reason !== null && !missing;
  return (
    <>
      <SheetTop title="Discard" tub={tub} onClose={onClose} />
      <div className="stack tablet:max-w-[640px] gap-4">
        <p className="text-30 font-bold">
          <Mass mg={tub.balanceMg} /> leaves the books
        </p>
        <p className="g g-warn">
          <span>Never down the drain. Your local rules and the supplier's safety data sheet decide.</span>
        </p>
        <Choices label="Reason" options={REASONS} value={reason} onChoose={setReason} />
        <label className="field">
          <span>{reason === 'Other' ? 'What happened?' : 'Note, if it helps'}</span>
          <input value={note} autoComplete="off" maxLength={2000} onChange={(event) => setNote(event.target.value)} />
        </label>
      </div>
      <div className="dock stack">
        <Problem text={recorder.problem} />
        <button
          type="button"
          className={`key wide ${ready ? 'end' : 'log-key'}`}
          disabled={!ready || recorder.saving}
          onClick={() => {
            if (reason === null) return;
            void recorder.record(
              {
                type: 'bucket-discarded',
                body: { bucketId: tub.id, displayedMg: tub.balanceMg, reason, note: note.trim() || null },
              },
              'Discarded.',
            );
          }}
        >
          {reason === null ? 'Choose the reason' : missing ? 'Say what happened' : 'Discard for good'}
        </button>
        <button type="button" className="key wide" onClick={onClose}>
          Keep it
        </button>
      </div>
    </>
  );
}
