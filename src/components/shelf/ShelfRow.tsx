import { Fragment } from 'react';
import { Mass } from '#components/ui/Mass.tsx';
import { Strip } from '#components/ui/Strip.tsx';
import type { Row } from '#contract/rows.ts';
import { formatBucketCode } from '#domain/bucket-code.ts';
import { GRADES, type PlaceNames, ageOf, isPastUseBy, placeOf } from './describe-bucket.ts';

/** One tub in the list: Strip, name, code, place, age, grade, mass. */
export function ShelfRow({ tub, facts, now }: { tub: Row<'buckets'>; facts: PlaceNames; now: Date }) {
  const flag = flagOf(tub, now);
  return (
    <a className="row" href={`/b/${tub.code}`}>
      <Strip lab={tub.lab} hiding={tub.hiding} />
      <div>
        <b className="wrap-anywhere">{tub.name}</b>
        <small className="ink2">
          {[formatBucketCode(tub.code), placeOf(tub, facts), ageOf(tub, now), GRADES[tub.grade].short].map(
            (piece, n) => (
              <Fragment key={piece}>
                {n === 0 ? null : ' · '}
                <span className="whitespace-nowrap">{piece}</span>
              </Fragment>
            ),
          )}
        </small>
        {flag === undefined ? null : <span className="badge g-warn whitespace-normal">{flag}</span>}
      </div>
      <span className="num">
        <Mass mg={tub.balanceMg} />
      </span>
    </a>
  );
}

function flagOf(tub: Row<'buckets'>, now: Date): string | undefined {
  if (tub.state === 'empty' || tub.state === 'discarded') return undefined;
  if (tub.needsRecount) return 'Two records disagree';
  if (!tub.released) return 'Not released';
  if (isPastUseBy(tub, now)) return 'Past its use-by';
  return tub.reservedFor === null ? undefined : `Kept for ${tub.reservedFor}`;
}
