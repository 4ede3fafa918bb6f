import { useRef, useState } from 'react';
import { useStation } from '#components/ui/station-context.ts';
import { type Imported, type SavedEntries, exportEntries, importEntries } from '#offline/tray-file.ts';
import { Alert } from './Alert.tsx';
import { useDecision } from './use-decision.ts';

/** Queue and tray as a file for safe keeping, and back from such a file on this device or another one. */
export function EntriesFile({ count }: { count: number }) {
  const { station } = useStation();
  const [note, setNote] = useState('');
  const input = useRef<HTMLInputElement>(null);
  const { decide, saving, problem } = useDecision(() => undefined);
  const save = () =>
    decide(async () => {
      setNote('');
      const file = await exportEntries(station);
      download(file);
      setNote(`${logs(file.count)} in ${file.name}.`);
    });
  const read = (file: Blob) =>
    decide(async () => {
      setNote('');
      setNote(told(await importEntries(station, await file.text())));
    });
  return (
    <section className="stack" aria-label="Logs as a file">
      <h2>Logs as a file</h2>
      <p className="ink2">All that waits and all that needs a decision, to keep safe or to carry to another device.</p>
      <div className="pair">
        <button type="button" className="key" disabled={saving || count === 0} onClick={() => void save()}>
          {count === 0 ? 'Nothing to save' : `Save ${logs(count)}`}
        </button>
        <button type="button" className="key" disabled={saving} onClick={() => input.current?.click()}>
          Read a file
        </button>
      </div>
      <input
        ref={input}
        type="file"
        accept=".json,application/json"
        className="hidden"
        aria-label="File of logs"
        onChange={(event) => {
          const [file] = event.target.files ?? [];
          event.target.value = '';
          if (file !== undefined) void read(file);
        }}
      />
      <p role="status" className={note === '' ? 'hidden' : 'g g-ok'}>
        <span>{note}</span>
      </p>
      <Alert text={problem} />
    </section>
  );
}

const logs = (n: number) => (n === 1 ? '1 log' : `${n} logs`);

function told({ waiting, rejected, known }: Imported): string {
  if (waiting + rejected === 0) return known === 0 ? 'No logs in this file.' : 'This device has them all already.';
  const parts = [
    waiting > 0 ? `${logs(waiting)} to send` : '',
    rejected > 0 ? `${logs(rejected)} to decide` : '',
    known > 0 ? `${known} known already` : '',
  ];
  return `Read: ${parts.filter((part) => part !== '').join(', ')}.`;
}

function download({ name, text }: SavedEntries): void {
  const link = document.createElement('a');
  link.href = URL.createObjectURL(new Blob([text], { type: 'application/json' }));
  link.download = name;
  link.click();
  URL.revokeObjectURL(link.href);
}
