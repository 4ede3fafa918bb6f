import { Mass } from '#components/ui/Mass.tsx';
import type { LetDown } from '#domain/propose-let-down.ts';
import type { MixFacts } from './use-mix-facts.ts';

interface Props {
  facts: MixFacts;
  letDown: LetDown;
  componentId: string;
  baseId: string;
  /** mg, the scale's step. */
  step: number;
}

/** A pigment pre-diluted in base, so that it can be weighed: from a tub that lies ready, or made first. */
export function LetDownOffer({ facts, letDown, componentId, baseId, step }: Props) {
  const tub = facts.buckets.find((bucket) => bucket.id === letDown.stockedId);
  const name = (id: string) => facts.components.get(id)?.name;
  const percent = `${Number((letDown.strength / 10_000_000).toFixed(1))} %`;
  const base = letDown.weights.get(baseId) ?? 0;
  const { make } = letDown;
  return (
    <>
      {make === undefined ? null : (
        <p>
          Or make a let-down first, {percent} {name(componentId)} in {name(baseId)}: at least{' '}
          <b className="num">
            <Mass mg={make.batch} step={step} />
          </b>
          .
        </p>
      )}
      <p>
        {make === undefined
          ? `Or take the let-down in ${tub?.code ?? 'stock'}, ${percent} ${name(componentId)}: `
          : 'Then weigh '}
        <b className="num">
          <Mass mg={letDown.mass} step={step} />
        </b>{' '}
        of it, and of {name(baseId)} only{' '}
        <b className="num">
          <Mass mg={base} step={step} />
        </b>
        .
      </p>
    </>
  );
}
