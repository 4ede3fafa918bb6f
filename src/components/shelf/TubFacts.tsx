import { Fragment, type ReactNode } from 'react';
import { Mass } from '#components/ui/Mass.tsx';
import { formatDay } from '#components/ui/format-time.ts';
import { useStation } from '#components/ui/station-context.ts';
import type { Row } from '#contract/rows.ts';
import { ageOf, placeOf } from './describe-bucket.ts';
import type { ShopFacts } from './use-shop-facts.ts';

/** Family, place, dates, tare, release: what stands on the label and what has changed since. */
export function TubFacts({ tub, facts }: { tub: Row<'buckets'>; facts: ShopFacts }) {
  const { locale } = useStation().station.shop;
  const person = (id: string | null | undefined) => (id ? facts.people.get(id)?.displayName : undefined);
  const batch = tub.batchId === null ? undefined : facts.batches.find((entry) => entry.id === tub.batchId);
  const released = [batch?.light, person(batch?.releasedBy)].filter(Boolean).join(', ');
  const filledBy = person(tub.filledBy);
  const age = ageOf(tub, new Date());
  const lines: [string, ReactNode][] = [
    ['Family', facts.families.get(tub.familyId)?.name ?? 'Not on this device'],
    ['Place', placeOf(tub, facts)],
    [
      'Filled',
      [formatDay(tub.filledAt, locale), age === 'today' ? age : `${age} ago`, filledBy].filter(Boolean).join(', '),
    ],
    ['Use by', tub.useBy === null ? 'Not given' : formatDay(tub.useBy, locale)],
    [
      'Tare',
      <>
        <Mass mg={tub.tareMg} />, no lid
      </>,
    ],
    ['Released', tub.released ? released || 'Yes' : 'No'],
  ];
  if (tub.generation > 0) lines.push(['Note', 'Contains returned ink']);
  return <Facts lines={lines} />;
}

/** Cure, limits and hazards, as they came with what went in. */
export function TubCare({ tub }: { tub: Row<'buckets'> }) {
  const lines: [string, ReactNode][] = [];
  if (tub.cureC !== null) lines.push(['Cure', `${tub.cureC} °C`]);
  if (tub.restrictions.length > 0) lines.push(['Limits', tub.restrictions.join(', ')]);
  if (tub.hazards.length > 0) lines.push(['Hazards', tub.hazards.join(' ')]);
  if (lines.length === 0) return null;
  return (
    <section className="stack">
      <h2>Care</h2>
      <Facts lines={lines} />
    </section>
  );
}

function Facts({ lines }: { lines: readonly [string, ReactNode][] }) {
  return (
    <dl className="facts">
      {lines.map(([name, value]) => (
        <Fragment key={name}>
          <dt>{name}</dt>
          <dd>{value}</dd>
        </Fragment>
      ))}
    </dl>
  );
}
