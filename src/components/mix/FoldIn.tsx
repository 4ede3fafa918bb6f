import { Mass } from '#components/ui/Mass.tsx';
import { Strip } from '#components/ui/Strip.tsx';
import { useStation } from '#components/ui/station-context.ts';
import { LeftOutList } from './LeftOutList.tsx';
import { PlanCard } from './PlanCard.tsx';
import { planFacts } from './describe-plan.ts';
import type { MixFacts } from './use-mix-facts.ts';
import type { SuggestionState } from './use-suggestions.ts';

interface Props {
  facts: MixFacts;
  state: SuggestionState;
  /** Index of the chosen suggestion; −1: start without leftovers. */
  chosen: number;
  onChoose: (index: number) => void;
  onRefuse: (bucketIds: readonly string[]) => void;
}

/** The leftovers that this batch could use up: one plan as a picture, the others as rows. */
export function FoldIn({ facts, state, chosen, onChoose, onRefuse }: Props) {
  const { station } = useStation();
  if (state.phase === 'waiting') return <p className="ink2">Type a mass to see which leftovers fit.</p>;
  if (state.phase === 'solving')
    return (
      <p className="ink2" role="status">
        Looking along the shelf
      </p>
    );
  if (state.phase === 'failed')
    return (
      <p className="badge warn g-warn whitespace-normal">{`No suggestion: ${state.problem} Weigh in without leftovers.`}</p>
    );
  const { suggestions, leftOut } = state.found;
  const shown = suggestions[chosen];
  const buckets = new Map(facts.buckets.map((bucket) => [bucket.id, bucket]));
  return (
    <>
      {suggestions.length === 0 ? <p>No leftover fits this batch.</p> : null}
      {shown === undefined ? null : (
        <PlanCard
          facts={facts}
          suggestion={shown}
          onRefuse={() => onRefuse(shown.plan.fromBuckets.map((from) => from.bucketId))}
        />
      )}
      <section className="stack" role="radiogroup" aria-label="Other plans">
        {suggestions.map((suggestion, index) => {
          if (index === chosen) return null;
          const first = buckets.get(suggestion.plan.fromBuckets[0]?.bucketId ?? '');
          return (
            <button
              key={suggestion.plan.fromBuckets.map((from) => from.bucketId).join() + suggestion.kind}
              type="button"
              role="radio"
              aria-checked={false}
              className="row alt text-left"
              onClick={() => onChoose(index)}
            >
              <Strip lab={first?.lab ?? null} hiding={first?.hiding ?? 0} />
              <div>
                <b>{suggestion.plan.fromBuckets.map((from) => buckets.get(from.bucketId)?.name).join(' and ')}</b>
                <small className="ink2">{planFacts(suggestion, station.shop.locale)[0]?.text}</small>
              </div>
              <span className="num">
                <Mass mg={suggestion.plan.reused} />
              </span>
            </button>
          );
        })}
        {suggestions.length > 0 ? (
          <button
            type="button"
            role="radio"
            aria-checked={chosen === -1}
            className="row alt text-left"
            onClick={() => onChoose(-1)}
          >
            <div>
              <b>Without leftovers</b>
              <small className="ink2">All fresh ink</small>
            </div>
          </button>
        ) : null}
        <LeftOutList leftOut={leftOut} />
      </section>
    </>
  );
}
