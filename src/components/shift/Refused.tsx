import type { QueuedOperation } from '#offline/outbox.ts';
import { describeOperation } from './describe-operation.ts';
import { useNames } from './use-names.ts';

/** A log that the server did not accept: why, and a copy of it for whoever mends it. Nothing is thrown away. */
export function Refused({ entry }: { entry: QueuedOperation }) {
  const names = useNames();
  if (names === undefined) return null;
  const { title } = describeOperation(entry.operation, names);
  return (
    <article className="decide card">
      <div>
        <h2>Not accepted: {title}</h2>
        <p>{entry.problem?.detail ?? 'The server gave no reason.'}</p>
      </div>
      <button type="button" className="key" onClick={() => saveCopy(entry)}>
        Save a copy
      </button>
      <p className="ink2">It stays on this device and on the server. Show it to a manager.</p>
    </article>
  );
}

function saveCopy(entry: QueuedOperation): void {
  const file = new Blob([JSON.stringify(entry, null, 2)], { type: 'application/json' });
  const link = document.createElement('a');
  link.href = URL.createObjectURL(file);
  link.download = `log-${entry.operation.opId}.json`;
  link.click();
  URL.revokeObjectURL(link.href);
}
