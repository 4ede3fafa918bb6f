import { useStation } from '#components/ui/station-context.ts';
import type { ShiftSpan, ShiftSummary } from '#domain/shift-summary.ts';
import { formatKilograms } from './format-kilograms.ts';
import { isBeyondMemory } from './shift-summary-span.ts';

/** Four numbers: batches, mixed, leftovers used up, discarded. */
export function ShiftSummaryFigures({ summary, span, now }: { summary: ShiftSummary; span: ShiftSpan; now: Date }) {
  const { station } = useStation();
  const kilograms = (mg: number) => formatKilograms(mg, station.shop.locale);
  const figures = [
    { name: 'Batches', value: String(summary.batches), unit: '', at: 'batches' },
    { name: 'Mixed', value: kilograms(summary.mixedMg), unit: 'kg', at: 'mixed' },
    { name: 'Leftovers used up', value: kilograms(summary.reusedMg), unit: 'kg', at: 'reused' },
    { name: 'Discarded here', value: kilograms(summary.discardedMg), unit: 'kg', at: 'discarded' },
  ];
  return (
    <section className="stack" aria-label="What was done">
      <dl className="figures">
        {figures.map(({ name, value, unit, at }) => (
          <div key={name}>
            <dt>{name}</dt>
            <dd className="num" data-figure={at}>
              {value} <u>{unit}</u>
            </dd>
          </div>
        ))}
      </dl>
      {summary.batches === 0 && summary.discards === 0 ? <p className="ink2">Nothing mixed in this time.</p> : null}
      {isBeyondMemory(span, now) ? (
        <p className="g g-warn">
          <span>Discards of more than 14 days ago are not counted.</span>
        </p>
      ) : null}
      <p className="small ink2">Of the shop, as this device knows it. Discards: of this device.</p>
    </section>
  );
}
