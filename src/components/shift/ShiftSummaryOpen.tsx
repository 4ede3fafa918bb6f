import { useFormulas } from '#components/ui/use-formulas.ts';
import { useStation } from '#components/ui/station-context.ts';
import { formatClock, formatDay } from '#components/ui/format-time.ts';
import { formatBucketCode } from '#domain/bucket-code.ts';
import type { OpenPoints } from '#domain/shift-summary.ts';
import type { ShownShift } from '#offline/shift-facts.ts';
import { type OpenItem, ShiftSummaryPoint } from './ShiftSummaryPoint.tsx';

/** What the next shift has to do, each with the way to it. */
export function ShiftSummaryOpen({ open, shown }: { open: OpenPoints; shown: ShownShift }) {
  const { station } = useStation();
  const formulas = useFormulas();
  if (formulas === undefined) return null;
  const tub = (id: string): OpenItem[] => {
    const bucket = shown.buckets.get(id);
    if (bucket === undefined) return [];
    return [{ id, name: bucket.name, detail: formatBucketCode(bucket.code), href: `/b/${bucket.code}` }];
  };
  const batch = (id: string): OpenItem[] => {
    const row = shown.batches.get(id);
    if (row === undefined) return [];
    const { locale } = station.shop;
    const detail = `${formatDay(row.mixedAt, locale)}, ${formatClock(row.mixedAt, locale)}`;
    return [{ id, name: formulas.get(row.formulaId)?.name ?? 'A batch', detail, href: `/shelf?batch=${id}` }];
  };
  const count = (name: string) => ({ id: name, name, detail: '', href: '/shift' });
  const points = [
    { title: 'Not accepted', glyph: 'g-stop', count: open.refused, items: [count('Decide on Shift')] },
    { title: 'Weigh again', glyph: 'g-two', items: open.recounts.flatMap(tub) },
    { title: 'Not released', glyph: 'g-warn', items: open.unreleased.flatMap(batch) },
    { title: 'At a press', glyph: 'g-return', items: open.atPress.flatMap(tub) },
    { title: 'Waits to be sent', glyph: 'g-device', count: open.waiting, items: [count('See what waits')] },
  ].filter((point) => (point.count ?? point.items.length) > 0);
  return (
    <section className="stack gap-4" aria-label="Still open">
      <h2>Still open</h2>
      {points.length === 0 ? <p className="g g-ok">Nothing is open.</p> : null}
      {points.map((point) => (
        <ShiftSummaryPoint key={point.title} {...point} />
      ))}
    </section>
  );
}
