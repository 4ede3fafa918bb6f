import { useState } from 'react';
import { Mass } from '#components/ui/Mass.tsx';
import { Unsaved } from '#components/ui/Unsaved.tsx';
import { useStation } from '#components/ui/station-context.ts';
import { whyUnsaved } from '#components/ui/why-unsaved.ts';
import type { Weighing } from '#contract/weighing.ts';
import type { Milligrams } from '#domain/mass.ts';
import { saveWeighing } from '#offline/weighings.ts';
import { undoAddition } from './log-addition.ts';
import { nameOf } from './StepList.tsx';
import type { WeighFacts } from './use-weigh-facts.ts';

/** Takes the last entry back; it names its mass and stays until the next entry. */
export function UndoKey({ weighing, facts }: { weighing: Weighing; facts: WeighFacts }) {
  const { station } = useStation();
  const [unsaved, setUnsaved] = useState<string>();
  const last = weighing.additions.at(-1);
  if (last === undefined) return null;
  const target = {
    target: facts.target,
    tolerance: facts.tolerance,
    readability: facts.scale.readabilityMg as Milligrams,
    now: new Date(),
  };
  const undo = () =>
    saveWeighing(station, undoAddition(weighing, target), weighing).catch((error: unknown) =>
      setUnsaved(whyUnsaved(error)),
    );
  if (unsaved !== undefined) return <Unsaved why={unsaved} />;
  return (
    <button
      type="button"
      className="key text-18 px-3"
      aria-label={`Undo ${nameOf(last, facts)}`}
      onClick={() => void undo()}
    >
      <span className="g g-undo">
        <span className="num">
          <Mass mg={last.actualMg} step={facts.scale.readabilityMg} />
        </span>
      </span>
    </button>
  );
}
