import type { Weighing } from '#contract/weighing.ts';
import { type Milligrams, type PartsPerBillion, WHOLE } from '#domain/mass.ts';
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
  const batch = Math.max(weighing.plannedMg, weighing.batchMg) as Milligrams;
  const contents = [...potContents(weighing.additions, weighing.leftovers), { composition, mass: actual }];
  const held = contents.reduce((sum, { mass }) => sum + mass, 0);
  const repairAt = (total: Milligrams) =>
    repairOvershoot({
      target: facts.target,
      planned: batch,
      contents,
      lastAddition: step.kind === 'component' ? { componentId: step.componentId, mass: actual } : undefined,
      tolerance: withRounding(facts, total),
      capacity: Math.max(LARGEST_POT, batch, held) as Milligrams,
      readability: facts.scale.readabilityMg as Milligrams,
    });
  let repair = repairAt(batch);
  // In a larger batch a step is a smaller part: twice more, and the total is the one that the rest is solved for.
  for (let turn = 0; turn < 2; turn++) {
    const grown = repair.choices.find((choice) => choice.kind === 'grow');
    if (grown !== undefined) repair = repairAt(grown.batch);
  }
  const fits = repair.state === 'on-plan' || repair.state === 'within-tolerance';
  const onTarget = actual === planned || (fits && Math.abs(actual - planned) <= toleranceOf(step, weighing, facts));
  return { onTarget, over: actual > planned && !fits ? { actual, planned, ...repair } : undefined };
}

/** What was weighed is rounded to the scale: a step of each component of the formula is let pass beside its tolerance. */
function withRounding(facts: WeighFacts, batch: Milligrams): ReadonlyMap<string, PartsPerBillion> {
  const rounding = Math.ceil((facts.scale.readabilityMg / batch) * WHOLE);
  const wider = new Map(facts.tolerance);
  for (const id of facts.target.keys()) {
    wider.set(id, Math.min(WHOLE, (wider.get(id) ?? 0) + rounding) as PartsPerBillion);
  }
  return wider;
}

/** How far a step may be off and still be on target: its component's own tolerance, at least half a scale step. */
function toleranceOf(step: Weighing['remaining'][number], weighing: Weighing, facts: WeighFacts): number {
  if (step.kind === 'bucket') return 0;
  const tolerance = facts.tolerance.get(step.componentId) ?? 0;
  return Math.max(facts.scale.readabilityMg / 2, (tolerance / 1e9) * weighing.batchMg);
}
