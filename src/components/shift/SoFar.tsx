import { useLiveQuery } from 'dexie-react-hooks';
import { useStation } from '#components/ui/station-context.ts';
import { readBatches } from '#offline/shown.ts';
import { formatKilograms } from './format-kilograms.ts';

/** Today's kilograms of this shop as this device knows them. */
export function SoFar() {
  const { station } = useStation();
  const batches = useLiveQuery(() => readBatches(station), [station]);
  if (batches === undefined) return null;
  const today = new Date().toDateString();
  const mixed = batches.filter((batch) => new Date(batch.mixedAt).toDateString() === today);
  const sum = (of: (batch: (typeof mixed)[number]) => number) => mixed.reduce((total, batch) => total + of(batch), 0);
  const kilograms = (mg: number) => formatKilograms(mg, station.shop.locale);
  const rows = [
    ['Batches', String(mixed.length), ''],
    ['Mixed', kilograms(sum((batch) => batch.actualMg)), 'kg'],
    ['Leftovers used up', kilograms(sum((batch) => batch.reusedMg)), 'kg'],
  ] as const;
  return (
    <section className="stack">
      <h2>Today in the shop</h2>
      <dl className="sum">
        {rows.map(([name, value, unit]) => (
          <div key={name} className="contents">
            <dt>{name}</dt>
            <dd className="num">
              {value} <u>{unit}</u>
            </dd>
          </div>
        ))}
      </dl>
      <a className="key wide" href="/shift/summary">
        <span className="g g-on">Shift summary</span>
      </a>
    </section>
  );
}
