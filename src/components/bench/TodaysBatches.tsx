import { useLiveQuery } from 'dexie-react-hooks';
import { Mass } from '#components/ui/Mass.tsx';
import { Strip } from '#components/ui/Strip.tsx';
import { formatClock } from '#components/ui/format-time.ts';
import { useFormulas } from '#components/ui/use-formulas.ts';
import { useStation } from '#components/ui/station-context.ts';
import { readBatches, readShelf } from '#offline/shown.ts';

const MOST = 6;

/** What was mixed today in the shop, newest first. */
export function TodaysBatches() {
  const { station } = useStation();
  const batches = useLiveQuery(() => readBatches(station), [station]);
  const shelf = useLiveQuery(() => readShelf(station), [station]);
  const formulas = useFormulas();
  if (batches === undefined || shelf === undefined || formulas === undefined) return null;
  const codes = new Map(shelf.map((tub) => [tub.batchId, tub.code]));
  const today = new Date().toDateString();
  const mixed = batches
    .filter((batch) => new Date(batch.mixedAt).toDateString() === today)
    .sort((a, b) => b.mixedAt.localeCompare(a.mixedAt));
  return (
    <section className="stack">
      <div className="head">
        <h2>Mixed today</h2>
        <span className="ink2">{mixed.length}</span>
      </div>
      {mixed.length === 0 ? <p className="ink2">Nothing yet. Tap Mix to start.</p> : null}
      {mixed.slice(0, MOST).map((batch) => {
        const formula = formulas.get(batch.formulaId);
        const revision = formula?.revisions.find((entry) => entry.revision === batch.revision);
        return (
          <a key={batch.id} className="row" href={codes.has(batch.id) ? `/b/${codes.get(batch.id)}` : '/shelf'}>
            <Strip lab={revision?.lab ?? null} hiding={revision?.hiding ?? 0} />
            <div>
              <b>{formula?.name ?? 'Formula not on this device'}</b>
              <small className={batch.state === 'released' ? 'ink2' : 'badge g-ask'}>
                {batch.state === 'released' ? formatClock(batch.mixedAt, station.shop.locale) : 'Not released'}
              </small>
            </div>
            <span className="num">
              <Mass mg={batch.actualMg} />
            </span>
          </a>
        );
      })}
    </section>
  );
}
