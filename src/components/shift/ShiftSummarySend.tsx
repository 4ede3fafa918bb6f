import { formatClock } from '#components/ui/format-time.ts';
import { useStation } from '#components/ui/station-context.ts';
import { mayRecord } from '#contract/roles.ts';
import type { ShiftSpan, ShiftSummary } from '#domain/shift-summary.ts';
import type { QueuedOperation } from '#offline/outbox.ts';
import { isHandedIn, reportOf } from './shift-summary-report.ts';
import { useHandIn } from './use-hand-in.ts';

interface Props {
  span: ShiftSpan;
  summary: ShiftSummary;
  note: string;
  reports: readonly QueuedOperation[];
}

/** Prints, and hands in what is shown: it waits on this device when there is no signal. */
export function ShiftSummarySend({ span, summary, note, reports }: Props) {
  const { station } = useStation();
  const { handIn, saving, problem } = useHandIn();
  const report = reportOf(span, summary, note);
  const mine = mayRecord(station.person.role, 'shift-reported');
  const again = reports.some((entry) => isHandedIn(entry, report));
  return (
    <div className="dock stack">
      <p role="alert" className={problem === undefined ? 'hidden' : 'badge warn g-warn whitespace-normal'}>
        {problem}
      </p>
      <Last entry={reports.at(-1)} />
      <div className={mine ? 'summary-keys' : ''}>
        <button type="button" className="key wide print-key" onClick={() => window.print()}>
          <span className="g g-print">Print</span>
        </button>
        {mine ? (
          <button
            type="button"
            className={`key wide ${again ? 'log-key' : 'go'}`}
            disabled={saving || again}
            onClick={() => void handIn(report)}
          >
            {again ? 'Handed in' : 'Send to the manager'}
          </button>
        ) : null}
      </div>
    </div>
  );
}

/** Where the last summary is. */
function Last({ entry }: { entry: QueuedOperation | undefined }) {
  const { station } = useStation();
  if (entry === undefined) return null;
  const at = (iso: string) => formatClock(iso, station.shop.locale);
  if (entry.status === 'waiting')
    return <p className="g g-device">On this device since {at(entry.recordedAt)}. Goes out with a signal.</p>;
  if (entry.status === 'rejected')
    return (
      <a className="badge warn g-warn whitespace-normal" href="/shift">
        Not accepted. Decide on Shift.
      </a>
    );
  if (entry.status === 'sent' && entry.sentAt !== null)
    return <p className="g g-ok">Last one sent {at(entry.sentAt)}.</p>;
  return null;
}
