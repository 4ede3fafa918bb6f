import type { Queue } from '#offline/shown.ts';
import { Dropped } from './Dropped.tsx';
import { FromElsewhere } from './FromElsewhere.tsx';
import type { EntryNames } from './make-fields.ts';
import { Refused } from './Refused.tsx';
import type { TraySheet } from './use-tray-sheet.ts';

interface Props {
  queue: Queue;
  names: EntryNames;
  /** What was done last; empty at first. */
  note: string;
  onDecide: (sheet: TraySheet) => void;
}

/** What needs a decision, the oldest first. */
export function Tray({ queue: { waiting, rejected }, names, note, onDecide }: Props) {
  return (
    <section className="stack gap-4" aria-label="Needs a decision">
      <p role="status" className={note === '' ? 'hidden' : 'g g-ok'}>
        <span>{note}</span>
      </p>
      <Dropped waiting={waiting} />
      <FromElsewhere rejected={rejected} />
      {rejected.map((entry) => (
        <Refused key={entry.opId} entry={entry} names={names} onDecide={onDecide} />
      ))}
    </section>
  );
}
