import type { Row } from '#contract/rows.ts';
import { Mass } from '#components/ui/Mass.tsx';
import type { Amount } from './read-amount.ts';

/** Which scale weighs the batch; its step decides which weights can be shown. */
export function ScalePicker({
  scales,
  amount,
  onScale,
}: {
  scales: readonly Row<'scales'>[];
  amount: Amount;
  onScale: (id: string) => void;
}) {
  return (
    <fieldset className="stack">
      <legend className="small ink2 pb-1">Scale</legend>
      <div className="by" role="radiogroup" aria-label="Scale">
        {scales.map((scale) => (
          <button
            key={scale.id}
            type="button"
            role="radio"
            aria-checked={scale.id === amount.scale?.id}
            className="key flex-col"
            onClick={() => onScale(scale.id)}
          >
            <span>{scale.name}</span>
            <small>
              <Mass mg={scale.readabilityMg} step={scale.readabilityMg} />
            </small>
          </button>
        ))}
      </div>
    </fieldset>
  );
}
