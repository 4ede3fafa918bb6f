import { useLiveQuery } from 'dexie-react-hooks';
import { useStation } from '#components/ui/station-context.ts';
import { readBatches } from '#offline/shown.ts';

/** Today's kilograms of this shop as this device knows them. */
export function SoFar() {
  const { station } = useStation();
  const batches = useLiveQuery(() => readBatches(station), [station]);
  if (batches === undefined) return null;
  const today = new Date().toDateString();
  const mixed = batches.filter((batch) => new Date(batch.mixedAt).toDateString() === today);
  const sum = (of: (batch: (typeof mixed)[number]) => number) => mixed.reduce((total, batch) => total + of(batch), 0);
  const kilograms = new Intl.NumberFormat(station.shop.locale, { minimumFractionDigits: 2, maximumFractionDigits: 2 });
  const rows = [
    ['Batches', String(mixed.length), ''],
    ['Mixed', kilograms.format(sum((batch) => batch.actualMg) / 1e6), 'kg'],
    ['Leftovers used up', kilograms.format(sum((batch) => batch.reusedMg) / 1e6), 'kg'],
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
    </section>
  );
}
