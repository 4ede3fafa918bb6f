import { useState } from 'react';
import { Mass } from '#components/ui/Mass.tsx';
import { Top } from '#components/ui/Top.tsx';
import type { Milligrams } from '#domain/mass.ts';
import type { Weighing } from '#contract/weighing.ts';
import { LogKey } from './LogKey.tsx';
import { Overshot } from './Overshot.tsx';
import { Reading } from './Reading.tsx';
import { StepList } from './StepList.tsx';
import { Unsaved } from '#components/ui/Unsaved.tsx';
import { UndoKey } from './UndoKey.tsx';
import { describeStep } from './describe-step.ts';
import { useStepEntry } from './use-step-entry.ts';
import type { WeighFacts } from './use-weigh-facts.ts';
import { useWakeLock } from './use-wake-lock.ts';

/** One step a screen: what, how much is still to go, the keypad, one action. */
export function WeighStep({ weighing, facts }: { weighing: Weighing; facts: WeighFacts }) {
  const entry = useStepEntry(weighing, facts);
  const [shownOver, setShownOver] = useState(false);
  useWakeLock();
  const step = weighing.remaining[0];
  if (step === undefined) return null;
  const what = describeStep(step, facts);
  const number = weighing.additions.length + 1;
  const top = (
    <>
      <Top
        title={facts.formula.name}
        sub={`Step ${number} of ${weighing.additions.length + weighing.remaining.length} · ${facts.scale.name}`}
        back={{ href: '/', label: 'Leave, the batch stays open' }}
      >
        <UndoKey weighing={weighing} facts={facts} />
      </Top>
      {entry.unsaved === undefined ? null : <Unsaved why={entry.unsaved} />}
    </>
  );
  if (shownOver && entry.over !== undefined) {
    return (
      <>
        {top}
        <Overshot
          weighing={weighing}
          facts={facts}
          what={what}
          over={entry.over}
          onLog={entry.log}
          onBack={() => setShownOver(false)}
        />
      </>
    );
  }
  const step1 = facts.scale.readabilityMg as Milligrams;
  const target = step.plannedMg as Milligrams;
  return (
    <>
      {top}
      <div className="weigh-cols flex-1">
        <StepList weighing={weighing} facts={facts} />
        <div className="work">
          <div className="step">
            <h2>
              {what.name}
              <small className="ink2 text-18 block font-normal">{what.detail}</small>
            </h2>
            <span className="num">
              <Mass mg={target} step={step1} />
            </span>
          </div>
          <Reading entry={entry} what={what} target={target} step={step1} />
        </div>
      </div>
      <div className="dock">
        {entry.problem === undefined ? null : (
          <p className="badge warn g-warn mb-2 whitespace-normal" role="alert">
            {entry.problem}
          </p>
        )}
        <LogKey entry={entry} step={step1} onOver={() => setShownOver(true)} />
      </div>
    </>
  );
}
