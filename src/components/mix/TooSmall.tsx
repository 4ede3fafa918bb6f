import { Mass } from '#components/ui/Mass.tsx';
import type { Milligrams } from '#domain/mass.ts';
import { scaleWeights, smallestWeighableBatch } from '#domain/scale-weights.ts';
import type { Amount } from './read-amount.ts';
import type { MixFacts } from './use-mix-facts.ts';

/** Warns, never blocks: the smallest component is too little for this scale, and how large a batch would do. */
export function TooSmall({ facts, amount }: { facts: MixFacts; amount: Amount }) {
  if (amount.state !== 'ok') return null;
  const { scale } = amount;
  const smallest = smallestWeighableBatch(facts.target, {
    readability: scale.readabilityMg as Milligrams,
    repeatability: scale.repeatabilityMg as Milligrams,
    minimum: scale.minimumMg as Milligrams,
    maximum: scale.maximumMg as Milligrams,
    errorLimit: facts.shop.settings.errorLimit,
  });
  if (amount.mass >= smallest) return null;
  const { weights } = scaleWeights(facts.target, amount.mass, scale.readabilityMg as Milligrams);
  const [id, least] = [...weights].reduce((a, b) => (b[1] < a[1] ? b : a));
  return (
    <section className="card stack" aria-label="Too small to weigh">
      <b className="badge warn g-warn justify-self-start">Small for this scale</b>
      <p>
        {facts.components.get(id)?.name} is only{' '}
        <b className="num">
          <Mass mg={least} step={scale.readabilityMg} />
        </b>
        . From at least{' '}
        <b className="num">
          <Mass mg={smallest} step={scale.readabilityMg} />
        </b>{' '}
        it can be weighed well. Or take a finer scale.
      </p>
    </section>
  );
}
