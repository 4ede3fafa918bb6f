import { useState } from 'react';
import { Mass } from '#components/ui/Mass.tsx';
import { formatClock } from '#components/ui/format-time.ts';
import { useRows } from '#components/ui/use-rows.ts';
import { useStation } from '#components/ui/station-context.ts';
import type { QueuedOperation } from '#offline/outbox.ts';
import { describeOperation } from './describe-operation.ts';
import { useNames } from './use-names.ts';

const FEW = 5;

/** Logs, newest first; the first few, the rest on demand. */
export function QueueList({
  title,
  empty,
  entries,
}: {
  title: string;
  empty: string;
  entries: readonly QueuedOperation[];
}) {
  const { station } = useStation();
  const names = useNames();
  const people = useRows('people');
  const [all, setAll] = useState(false);
  if (names === undefined) return null;
  const newest = [...entries].reverse();
  const shown = all ? newest : newest.slice(0, FEW);
  return (
    <section className="stack log" aria-label={title}>
      <h2>{title}</h2>
      {entries.length === 0 ? <p className="ink2">{empty}</p> : null}
      {shown.map(({ operation }) => {
        const { title: what, massMg } = describeOperation(operation, names);
        return (
          <div key={operation.opId} className="row">
            <div>
              <b>{what}</b>
              <small className="ink2">
                {formatClock(operation.deviceTime, station.shop.locale)} ·{' '}
                {people?.get(operation.actorId)?.displayName ?? ''}
              </small>
            </div>
            {massMg === undefined ? null : (
              <span className="num">
                <Mass mg={massMg} />
              </span>
            )}
          </div>
        );
      })}
      {newest.length > shown.length ? (
        <button type="button" className="key" onClick={() => setAll(true)}>
          {newest.length - shown.length} more
        </button>
      ) : null}
    </section>
  );
}
