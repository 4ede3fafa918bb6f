import { Mass } from '#components/ui/Mass.tsx';
import type { Row } from '#contract/rows.ts';
import type { Milligrams } from '#domain/mass.ts';
import { type ScaleLimits, scaleWeights, smallestWeighableBatch } from '#domain/scale-weights.ts';
import { flagWeights } from '#domain/weighing-flags.ts';
import { LetDownOffer } from './LetDownOffer.tsx';
import type { ShelfFacts } from './fold-in-problem.ts';
import { letDownFor } from './let-down-for.ts';
import type { Amount } from './read-amount.ts';
import type { MixFacts } from './use-mix-facts.ts';

interface Props {
  facts: MixFacts;
  amount: Amount;
  shelf: ShelfFacts | undefined;
}

/** Warns, never blocks: the smallest component is too little for this scale, and what would do. */
export function TooSmall({ facts, amount, shelf }: Props) {
  if (amount.state !== 'ok') return null;
  const { mass, scale } = amount;
  const limits = limitsOf(scale, facts.shop.settings.errorLimit);
  const { weights } = scaleWeights(facts.target, mass, limits.readability);
  const flags = flagWeights(weights, () => limits);
  if (![...flags.values()].some((found) => found.some((flag) => flag !== 'over-maximum'))) return null;
  const smallest = smallestWeighableBatch(facts.target, limits);
  const [id, least] = [...weights].reduce((a, b) => (b[1] < a[1] ? b : a));
  const offer = shelf && letDownFor(facts, shelf, limits, id);
  return (
    <section className="card stack" aria-label="Too small to weigh">
      <b className="badge warn g-warn justify-self-start">Small for this scale</b>
      <p>
        {facts.components.get(id)?.name} is only{' '}
        <b className="num">
          <Mass mg={least} step={scale.readabilityMg} />
        </b>
        . <Larger mass={mass} smallest={smallest} scale={scale} /> Or take a finer scale.
      </p>
      {offer === undefined ? null : (
        <LetDownOffer facts={facts} {...offer} componentId={id} step={scale.readabilityMg} />
      )}
    </section>
  );
}

function Larger({ mass, smallest, scale }: { mass: number; smallest: number; scale: Row<'scales'> }) {
  if (smallest > scale.maximumMg) return 'No batch on this scale is large enough for it.';
  if (smallest <= mass) return 'A few steps more bring it up.';
  return (
    <>
      From at least{' '}
      <b className="num">
        <Mass mg={smallest} step={scale.readabilityMg} />
      </b>{' '}
      it can be weighed well.
    </>
  );
}

function limitsOf(scale: Row<'scales'>, errorLimit: number): ScaleLimits {
  return {
    readability: scale.readabilityMg as Milligrams,
    repeatability: scale.repeatabilityMg as Milligrams,
    minimum: scale.minimumMg as Milligrams,
    maximum: scale.maximumMg as Milligrams,
    errorLimit,
  };
}
