import { Mass } from '#components/ui/Mass.tsx';
import { Strip } from '#components/ui/Strip.tsx';
import type { MixFacts } from './use-mix-facts.ts';

/** Before any mixing: the same colour that stands on the shelf already, or is kept for someone. */
export function DoNotMix({ facts }: { facts: MixFacts }) {
  const same = facts.buckets
    .filter((bucket) => bucket.formulaId === facts.formula.id && bucket.state === 'shelf' && bucket.balanceMg > 0)
    .sort((a, b) => Number(a.reservedFor !== null) - Number(b.reservedFor !== null) || b.balanceMg - a.balanceMg);
  const first = same[0];
  if (first === undefined) return null;
  const place = first.locationId === null ? undefined : facts.locations.get(first.locationId)?.code;
  return (
    <section className="hint card" aria-label="First: do not mix">
      <div className="row">
        <Strip lab={first.lab} hiding={first.hiding} />
        <div>
          <b className="badge warn">First: do not mix</b>
          <span>
            <b className="num">
              <Mass mg={first.balanceMg} />
            </b>{' '}
            stands {place === undefined ? 'on the shelf' : `on ${place}`}
            {first.reservedFor === null ? '.' : `, kept for ${first.reservedFor}.`}
            {same.length > 1 ? ` ${same.length - 1} more.` : ''}
          </span>
        </div>
      </div>
      <a className="key" href={`/b/${first.code}`}>
        Open this tub
      </a>
    </section>
  );
}
