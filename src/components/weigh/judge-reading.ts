import type { Weighing } from '#contract/weighing.ts';
import type { Milligrams, PartsPerBillion } from '#domain/mass.ts';
import { repairOvershoot } from '#domain/repair-overshoot.ts';
import { potContents } from './log-addition.ts';
import { requireLeftover } from '#components/ui/weighing-step.ts';
import type { WeighFacts } from './use-weigh-facts.ts';

type Repair = ReturnType<typeof repairOvershoot>;

export interface Overshoot {
  actual: Milligrams;
  planned: Milligrams;
  state: Repair['state'];
  choices: Repair['choices'];
}

export interface Verdict {
  onTarget: boolean;
  over: Overshoot | undefined;
}

const WHOLE = 1_000_000_000 as PartsPerBillion;
/** A pot may grow to this; which container it goes into is chosen at the finish. */
const LARGEST_POT = 100_000_000 as Milligrams;

/** What a reading would do to the batch if it were logged: on target, carry on, or a repair. */
export function judgeReading(weighing: Weighing, facts: WeighFacts, actual: Milligrams): Verdict {
  const step = weighing.remaining[0];
  if (step === undefined) return { onTarget: false, over: undefined };
  const planned = step.plannedMg as Milligrams;
  const composition =
    step.kind === 'component'
      ? new Map([[step.componentId, WHOLE]])
      : requireLeftover(weighing.leftovers, step.bucketId);
  const repair = repairOvershoot({
    target: facts.target,
    planned: Math.max(weighing.plannedMg, weighing.batchMg) as Milligrams,
    contents: [...potContents(weighing.additions, weighing.leftovers), { composition, mass: actual }],
    lastAddition: step.kind === 'component' ? { componentId: step.componentId, mass: actual } : undefined,
    tolerance: facts.tolerance,
    capacity: LARGEST_POT,
    readability: facts.scale.readabilityMg as Milligrams,
  });
  const fits = repair.state === 'on-plan' || repair.state === 'within-tolerance';
  const onTarget = actual === planned || (fits && Math.abs(actual - planned) <= toleranceOf(step, weighing, facts));
  return { onTarget, over: actual > planned && !fits ? { actual, planned, ...repair } : undefined };
}

/** How far a step may be off and still be on target: its component's own tolerance, at least half a scale step. */
function toleranceOf(step: Weighing['remaining'][number], weighing: Weighing, facts: WeighFacts): number {
  if (step.kind === 'bucket') return 0;
  const tolerance = facts.tolerance.get(step.componentId) ?? 0;
  return Math.max(facts.scale.readabilityMg / 2, (tolerance / 1e9) * weighing.batchMg);
}
