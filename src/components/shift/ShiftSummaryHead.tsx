import { formatClock, formatDay } from '#components/ui/format-time.ts';
import { useStation } from '#components/ui/station-context.ts';
import type { ShiftSpan } from '#domain/shift-summary.ts';
import { describeSpan } from './shift-summary-span.ts';

/** The time in words; on paper also whose shop, who printed it and when. */
export function ShiftSummaryHead({ span, now }: { span: ShiftSpan; now: Date }) {
  const { station } = useStation();
  const { locale, name } = station.shop;
  const printed = now.toISOString();
  return (
    <header className="stack gap-1">
      <p className="paper-only">
        <b>{name}</b> · {station.station.name}
      </p>
      <h2>{describeSpan(span, locale)}</h2>
      <p className="paper-only">
        {station.person.displayName}, {station.person.role} · printed {formatDay(printed, locale)},{' '}
        {formatClock(printed, locale)}
      </p>
    </header>
  );
}
