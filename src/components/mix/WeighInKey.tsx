import { useState } from 'react';
import { Unsaved } from '#components/ui/Unsaved.tsx';
import { useStation } from '#components/ui/station-context.ts';
import { whyUnsaved } from '#components/ui/why-unsaved.ts';
import { formatGrams } from '#domain/format-mass.ts';
import type { Milligrams } from '#domain/mass.ts';
import { saveWeighing } from '#offline/weighings.ts';
import type { Amount } from './read-amount.ts';
import { freshPlan, openWeighing } from './open-weighing.ts';
import type { MixFacts } from './use-mix-facts.ts';
import type { SuggestionState } from './use-suggestions.ts';

/** Opens the batch on the disk, then leaves for the scale. Never waits for a suggestion. */
export function WeighInKey({
  facts,
  amount,
  state,
  chosen,
}: {
  facts: MixFacts;
  amount: Amount;
  state: SuggestionState;
  chosen: number;
}) {
  const { station } = useStation();
  const [opening, setOpening] = useState(false);
  const [unsaved, setUnsaved] = useState<string>();
  if (amount.state !== 'ok') {
    return (
      <button type="button" className="key wide log-key" disabled>
        Weigh in
      </button>
    );
  }
  const plan =
    state.phase === 'done' && state.batchMg === amount.mass
      ? (state.found.suggestions[chosen]?.plan ?? state.found.fresh)
      : freshPlan(facts, amount);

  async function start() {
    if (amount.state !== 'ok' || opening) return;
    setOpening(true);
    const weighing = openWeighing({ facts, plan, scale: amount.scale, personId: station.person.id, now: new Date() });
    try {
      await saveWeighing(station, weighing);
      location.assign(`/weigh?batch=${weighing.id}`);
    } catch (error) {
      setOpening(false);
      setUnsaved(whyUnsaved(error));
    }
  }
  return (
    <>
      {unsaved === undefined ? null : <Unsaved why={unsaved} />}
      <button type="button" className="key go wide" disabled={opening} onClick={() => void start()}>
        Weigh in {formatGrams(amount.mass, amount.scale.readabilityMg as Milligrams, station.shop.locale)} g
      </button>
    </>
  );
}
