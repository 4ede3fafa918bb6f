import { useState } from 'react';
import { Choices } from '#components/ui/Choices.tsx';
import { Top } from '#components/ui/Top.tsx';
import { useStation } from '#components/ui/station-context.ts';
import { dropEntry } from '#offline/tray.ts';
import { Alert } from './Alert.tsx';
import type { SheetProps } from './CorrectSheet.tsx';
import { describeOperation } from './describe-operation.ts';
import { EntryWords } from './EntryWords.tsx';
import { useDecision } from './use-decision.ts';
import { useKeyboardForm } from './use-keyboard-form.ts';

const REASONS = ['Recorded twice', 'It did not happen', 'Put right in another log', 'Other'].map((name) => ({
  value: name,
  name,
}));

/** An entry that is let go: asked with its reason, which a manager finds beside it. */
export function DropSheet({ entry: { operation }, names, onClose, onDone }: SheetProps) {
  const { station } = useStation();
  const [reason, setReason] = useState<string | null>(null);
  const [note, setNote] = useState('');
  const decision = useDecision(() => onDone('Dropped. It counts nowhere.'));
  const form = useKeyboardForm(onClose);
  const said = note.trim();
  const why = reason === 'Other' ? said : said === '' ? reason : `${reason}: ${said}`;
  const ready = reason !== null && why !== '';
  return (
    <form
      ref={form}
      className="contents"
      onSubmit={(event) => {
        event.preventDefault();
        if (ready) void decision.decide(() => dropEntry(station, operation.opId, why ?? ''));
      }}
    >
      <Top
        title="Drop this log"
        sub={describeOperation(operation, names).title}
        back={{ href: '/shift', label: 'Back to Shift', onGo: onClose }}
      />
      <div className="stack tablet:max-w-[640px] gap-4">
        <p className="g g-warn">
          <span>What it says then counts nowhere. If the ink moved, correct it instead.</span>
        </p>
        <Choices label="Reason" options={REASONS} value={reason} onChoose={setReason} className="pair" />
        <label className="field">
          <span>{reason === 'Other' ? 'What happened?' : 'Note, if it helps'}</span>
          <input value={note} autoComplete="off" maxLength={160} onChange={(event) => setNote(event.target.value)} />
        </label>
        <div className="card">
          <EntryWords operation={operation} names={names} />
        </div>
      </div>
      <div className="dock stack">
        <Alert text={decision.problem} />
        <button type="submit" className={`key wide ${ready ? 'end' : 'log-key'}`} disabled={!ready || decision.saving}>
          {reason === null ? 'Choose the reason' : ready ? 'Drop it' : 'Say what happened'}
        </button>
        <button type="button" className="key wide" onClick={onClose}>
          Keep it
        </button>
      </div>
    </form>
  );
}
