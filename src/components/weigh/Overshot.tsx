import { Gauge } from '#components/ui/Gauge.tsx';
import { useStation } from '#components/ui/station-context.ts';
import type { Weighing } from '#contract/weighing.ts';
import { formatGrams } from '#domain/format-mass.ts';
import type { Milligrams } from '#domain/mass.ts';
import type { StepWords } from './describe-step.ts';
import type { Overshoot } from './judge-reading.ts';
import { RepairAdditions } from './RepairAdditions.tsx';
import type { WeighFacts } from './use-weigh-facts.ts';

interface Props {
  weighing: Weighing;
  facts: WeighFacts;
  what: StepWords;
  over: Overshoot;
  onLog: () => Promise<void>;
  onBack: () => void;
}

/** Overshot: the repairs with their new totals, least new ink first. Nothing is logged until one is chosen. */
export function Overshot({ weighing, facts, what, over, onLog, onBack }: Props) {
  const { station } = useStation();
  const grams = (mg: number) =>
    formatGrams(mg as Milligrams, facts.scale.readabilityMg as Milligrams, station.shop.locale);
  const grow = over.choices.find((choice) => choice.kind === 'grow');
  const surplus = over.actual - over.planned;
  return (
    <div className="over-cols stack">
      <div className="stack gap-4">
        <section className="over" role="alert">
          <p>
            <b className="badge stop g-stop">Overshot</b>
            <span>
              {grams(over.actual)} of {grams(over.planned)} g
            </span>
          </p>
          <div className="big">+{grams(surplus)} g</div>
          <p className="font-medium">{what.name}</p>
        </section>
        <Gauge
          lab={what.lab}
          hiding={what.hiding}
          reading={over.actual}
          target={over.planned}
          label={`${grams(over.actual)} g, target ${grams(over.planned)} g`}
        />
        {grow === undefined ? null : <RepairAdditions facts={facts} additions={grow.additions} />}
      </div>
      <section className="stack" aria-label="Repair">
        {grow === undefined ? (
          <p>No amount of fresh ink brings this back. Take some out, then type the reading again.</p>
        ) : (
          <button type="button" className="key go choice" onClick={() => void onLog()}>
            <span>
              <b>Grow the batch</b>
              <small>Least new ink that ends on target</small>
            </span>
            <span className="num">
              {grams(grow.batch)} g<small>+{grams(grow.batch - weighing.batchMg)} g</small>
            </span>
          </button>
        )}
        <button type="button" className="key choice" onClick={onBack}>
          <span>
            <b>Take {grams(surplus)} g back</b>
            <small>Into a labelled cup, never the pail. Then weigh again.</small>
          </span>
          <span className="num">
            {grams(weighing.batchMg)} g<small>no new ink</small>
          </span>
        </button>
        <button type="button" className="key choice" onClick={onBack}>
          <span>
            <b>Type the reading again</b>
            <small>Nothing is logged yet</small>
          </span>
          <span className="g g-undo" />
        </button>
      </section>
    </div>
  );
}
