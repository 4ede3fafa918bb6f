import { formatClock, formatDay } from '#components/ui/format-time.ts';
import { useRows } from '#components/ui/use-rows.ts';
import { useStation } from '#components/ui/station-context.ts';
import { mayRecord } from '#contract/roles.ts';
import type { QueuedOperation } from '#offline/outbox.ts';
import { describeOperation } from './describe-operation.ts';
import { EntryWords } from './EntryWords.tsx';
import type { EntryNames } from './make-fields.ts';
import type { TraySheet } from './use-tray-sheet.ts';

interface Props {
  entry: QueuedOperation;
  names: EntryNames;
  onDecide: (sheet: TraySheet) => void;
}

/** A log that the server did not accept: why, what it says, and what can be done with it. */
export function Refused({ entry: { operation, problem }, names, onDecide }: Props) {
  const { station } = useStation();
  const people = useRows('people');
  const { title } = describeOperation(operation, names);
  const { role } = station.person;
  const { opId, deviceTime } = operation;
  const { locale } = station.shop;
  const today = new Date(deviceTime).toDateString() === new Date().toDateString();
  const when = `${today ? '' : `${formatDay(deviceTime, locale)}, `}${formatClock(deviceTime, locale)}`;
  const who = people?.get(operation.actorId)?.displayName;
  return (
    <article className="decide card" aria-label={`Not accepted: ${title}`} data-refused={opId}>
      <div>
        <h2>Not accepted: {title}</h2>
        <small className="ink2">
          {when}
          {who === undefined ? '' : ` · ${who}`}
        </small>
      </div>
      <p className="g g-warn">
        <span>{problem?.detail ?? 'The server gave no reason.'}</span>
      </p>
      <EntryWords operation={operation} names={names} />
      {mayRecord(role, operation.type) ? (
        <div className="pair">
          <button type="button" className="key" onClick={() => onDecide({ act: 'correct', opId })}>
            Correct
          </button>
          <button type="button" className="key" onClick={() => onDecide({ act: 'drop', opId })}>
            Drop
          </button>
        </div>
      ) : (
        <p className="ink2">This is not for the role of {role}. Show it to a mixer or a manager.</p>
      )}
    </article>
  );
}
