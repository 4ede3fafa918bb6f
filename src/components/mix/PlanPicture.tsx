import { Fragment } from 'react';
import { formatGrams } from '#domain/format-mass.ts';
import type { Milligrams } from '#domain/mass.ts';
import { type Lab, filmOf } from '#components/ui/film.ts';
import { useStation } from '#components/ui/station-context.ts';

interface Part {
  name: string;
  mg: number;
  lab: Lab | null;
}

const TOP = 12;
const BOTTOM = 186;
const HEIGHT = BOTTOM - TOP;

/** The plan as a picture: fresh ink above, leftovers below, flowing into the batch's pot. */
export function PlanPicture({
  fresh,
  buckets,
  batchMg,
  name,
}: {
  fresh: readonly Part[];
  buckets: readonly Part[];
  batchMg: number;
  name: string;
}) {
  const { station } = useStation();
  const grams = (mg: number) => `${formatGrams(mg as Milligrams, 100 as Milligrams, station.shop.locale)} g`;
  const freshMg = fresh.reduce((sum, part) => sum + part.mg, 0);
  const freshHeight = (freshMg / batchMg) * HEIGHT;
  const label = [`${grams(freshMg)} of fresh ink`, ...buckets.map((part) => `${grams(part.mg)} of ${part.name}`)].join(
    ', ',
  );
  let above = TOP + freshHeight;
  const slots = buckets.map((part, n) => {
    const height = (part.mg / batchMg) * HEIGHT;
    const slot = { part, from: above, to: above + height, tubTop: 186 - 58 * (buckets.length - n) + 6 };
    above += height;
    return slot;
  });
  return (
    <svg
      className="picture"
      viewBox="0 0 358 200"
      preserveAspectRatio="xMinYMid"
      role="img"
      aria-label={`${label} flow into ${grams(batchMg)} of ${name}`}
    >
      {freshMg > 0 ? (
        <path
          d={`M130 12H242L${edge(TOP + freshHeight)} ${TOP + freshHeight}L130 ${TOP + Math.min(freshHeight, 108)}z`}
          fill="var(--color-hair)"
        />
      ) : null}
      <FreshBar fresh={fresh} freshMg={freshMg} height={Math.min(freshHeight, 108)} />
      <path d="M242 12h112l-14 174h-84z" fill="var(--color-hair)" />
      {slots.map(({ part, from, to, tubTop }) => (
        <Fragment key={part.name}>
          <path
            d={`M152 ${tubTop + 8}L${edge(from)} ${from}L${edge(to)} ${to}L148 ${tubTop + 44}z`}
            fill={filmOf(part.lab).colour}
          />
          <path
            d={`M${edge(from)} ${from}H${596 - edge(from)}L${596 - edge(to)} ${to}H${edge(to)}z`}
            fill={filmOf(part.lab).colour}
          />
          <path
            d={`M100 ${tubTop}h56l-5 46h-46z`}
            fill={filmOf(part.lab).colour}
            stroke="var(--color-ink)"
            strokeWidth="3"
          />
          <text className="b" x="0" y={tubTop + 22}>
            {grams(part.mg)}
          </text>
          <text
            x="0"
            y={tubTop + 42}
            textLength={part.name.length > 9 ? 90 : undefined}
            lengthAdjust="spacingAndGlyphs"
          >
            {part.name.length > 18 ? `${part.name.slice(0, 17)}…` : part.name}
          </text>
        </Fragment>
      ))}
      <path d="M242 10h112l-14 178h-84z" fill="none" stroke="var(--color-ink)" strokeWidth="4" />
      {freshMg > 0 ? (
        <>
          <text className="b" x="0" y="34">
            {grams(freshMg)}
          </text>
          <text x="0" y="56">
            fresh, {fresh.length} {fresh.length === 1 ? 'part' : 'parts'}
          </text>
        </>
      ) : null}
    </svg>
  );
}

/** Left edge of the pot at a height of the picture: it narrows from 242 to 256. */
function edge(y: number): number {
  return 242 + ((y - TOP) / HEIGHT) * 14;
}

function FreshBar({ fresh, freshMg, height }: { fresh: readonly Part[]; freshMg: number; height: number }) {
  if (freshMg === 0) return null;
  let y = TOP;
  return (
    <>
      {fresh.map((part) => {
        const slice = (part.mg / freshMg) * height;
        const top = y;
        y += slice;
        return (
          <path
            key={part.name}
            d={`M114 ${top}h16v${slice}h-16z`}
            fill={part.lab === null ? 'var(--color-ink2)' : filmOf(part.lab).colour}
          />
        );
      })}
      <path d={`M114 12h16v${height}h-16z`} fill="none" stroke="var(--color-line)" />
    </>
  );
}
