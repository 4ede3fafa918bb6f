import { ageInDays } from '#components/ui/format-time.ts';
import { useStation } from '#components/ui/station-context.ts';
import { planFacts, planTitle } from './describe-plan.ts';
import { PlanPicture } from './PlanPicture.tsx';
import type { Suggestion } from './suggestions.ts';
import type { MixFacts } from './use-mix-facts.ts';

const GRADES = {
  untouched: 'untouched',
  returned: 'was at the press',
  assumed: 'contents assumed',
  unknown: 'unknown',
} as const;

/** The chosen plan: what to fetch from where, and how good it is. */
export function PlanCard({
  facts,
  suggestion,
  onRefuse,
}: {
  facts: MixFacts;
  suggestion: Suggestion;
  onRefuse: () => void;
}) {
  const { station } = useStation();
  const buckets = new Map(facts.buckets.map((bucket) => [bucket.id, bucket]));
  const { plan } = suggestion;
  const now = new Date();
  return (
    <section className="plan card" aria-label="Use up">
      <h3>{planTitle(plan, buckets, station.shop.locale)}</h3>
      <PlanPicture
        name={facts.formula.name}
        batchMg={plan.batch}
        fresh={[...plan.fresh]
          .filter(([, mg]) => mg > 0)
          .map(([id, mg]) => {
            const component = facts.components.get(id);
            return { name: component?.name ?? id, mg, lab: component?.lab ?? null };
          })}
        buckets={plan.fromBuckets.map((from) => {
          const bucket = buckets.get(from.bucketId);
          return { name: bucket?.name ?? '', mg: from.mass, lab: bucket?.lab ?? null };
        })}
      />
      <ul className="grid gap-1">
        {plan.fromBuckets.map((from) => {
          const bucket = buckets.get(from.bucketId);
          if (bucket === undefined) return null;
          const place = bucket.locationId === null ? 'no place noted' : facts.locations.get(bucket.locationId)?.code;
          return (
            <li key={from.bucketId}>
              <b>{place}</b> · {bucket.code.slice(0, 4)}-{bucket.code.slice(4)} · {ageInDays(bucket.filledAt, now)} days
              · {GRADES[bucket.grade]}
            </li>
          );
        })}
      </ul>
      <p className="facts-line">
        {planFacts(suggestion, station.shop.locale).map((fact) => (
          <span key={fact.text} className={`badge ${fact.glyph}`}>
            {fact.text}
          </span>
        ))}
      </p>
      <button type="button" className="key" onClick={onRefuse}>
        Not this one
      </button>
    </section>
  );
}
