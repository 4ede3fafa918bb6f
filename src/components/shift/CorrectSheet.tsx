import { useState } from 'react';
import { Top } from '#components/ui/Top.tsx';
import { useStation } from '#components/ui/station-context.ts';
import type { QueuedOperation } from '#offline/outbox.ts';
import { correctEntry } from '#offline/tray.ts';
import { Alert } from './Alert.tsx';
import { describeOperation } from './describe-operation.ts';
import { keyOf } from './entry-field.ts';
import { entryFields } from './entry-fields.ts';
import { FieldInput } from './FieldInput.tsx';
import type { EntryNames } from './make-fields.ts';
import { type Typed, readCorrection } from './read-correction.ts';
import { useDecision } from './use-decision.ts';
import { useKeyboardForm } from './use-keyboard-form.ts';

export interface SheetProps {
  entry: QueuedOperation;
  names: EntryNames;
  onClose: () => void;
  /** With the note to show. */
  onDone: (note: string) => void;
}

/** The refused entry as a form: what is mended is sent as an entry of its own in its place. */
export function CorrectSheet({ entry: { operation, problem }, names, onClose, onDone }: SheetProps) {
  const { station } = useStation();
  const [typed, setTyped] = useState<Typed>({});
  const fields = entryFields(operation, names);
  const read = readCorrection(operation, fields, typed);
  const problems = 'problems' in read ? read.problems : {};
  const decision = useDecision(() => onDone('Sent again. The old one is let go.'));
  const form = useKeyboardForm(onClose);
  const known = new Set(fields.map(keyOf));
  const other = Object.entries(problems).find(([key]) => !known.has(key))?.[1];
  const send = async () => {
    if ('body' in read) await decision.decide(() => correctEntry(station, operation.opId, read.body));
  };
  return (
    <form
      ref={form}
      className="contents"
      noValidate
      onSubmit={(event) => {
        event.preventDefault();
        void send();
      }}
    >
      <Top
        title="Correct and send again"
        sub={describeOperation(operation, names).title}
        back={{ href: '/shift', label: 'Back to Shift', onGo: onClose }}
      />
      <div className="stack tablet:max-w-[640px] gap-4">
        <p className="g g-warn">
          <span>{problem?.detail ?? 'The server gave no reason.'}</span>
        </p>
        <div className="correct-fields">
          {fields.map((field) => (
            <FieldInput
              key={keyOf(field)}
              field={field}
              text={typed[keyOf(field)]}
              problem={problems[keyOf(field)]}
              onType={(text) => setTyped({ ...typed, [keyOf(field)]: text })}
            />
          ))}
        </div>
      </div>
      <div className="dock stack">
        <Alert text={decision.problem ?? other} />
        <button
          type="submit"
          className={`key wide ${'body' in read ? 'go' : 'log-key'}`}
          disabled={!('body' in read) || decision.saving}
        >
          {'body' in read ? (read.changed ? 'Send the correction' : 'Send again as it is') : 'Mend what is marked'}
        </button>
        <button type="button" className="key wide" onClick={onClose}>
          Not now
        </button>
      </div>
    </form>
  );
}
