import { v7 as uuidv7 } from 'uuid';
import type { Row } from '#contract/rows.ts';
import type { Weighing } from '#contract/weighing.ts';
import type { FoldInPlan } from '#domain/fold-in.ts';
import type { Milligrams } from '#domain/mass.ts';
import { scaleWeights } from '#domain/scale-weights.ts';
import { planSteps } from '#domain/weighing-steps.ts';
import type { Amount } from './read-amount.ts';
import type { MixFacts } from './use-mix-facts.ts';
import { compositionOf } from './fold-in-problem.ts';
import { toOpenStep, toShares } from '#components/ui/weighing-step.ts';

/** Only what steps need of a plan. */
type Weighable = Pick<FoldInPlan, 'batch' | 'fromBuckets' | 'fresh'>;

/** All fresh ink, on the scale's steps: the plan that needs no search. */
export function freshPlan(facts: MixFacts, amount: Amount & { state: 'ok' }): Weighable {
  const { weights } = scaleWeights(facts.target, amount.mass, amount.scale.readabilityMg as Milligrams);
  return { batch: amount.mass, fromBuckets: [], fresh: weights };
}

interface Opening {
  facts: MixFacts;
  plan: Weighable;
  scale: Row<'scales'>;
  personId: string;
  now: Date;
}

/** The open batch as it goes to the disk: leftovers first, then the formula's order. */
export function openWeighing({ facts, plan, scale, personId, now }: Opening): Weighing {
  const at = now.toISOString();
  return {
    id: uuidv7(),
    formulaId: facts.formula.id,
    revision: facts.revision.revision,
    jobId: facts.job?.id ?? null,
    rush: facts.job === undefined,
    scaleId: scale.id,
    plannedMg: plan.batch,
    batchMg: plan.batch,
    ...stepsOf(facts, plan),
    additions: [],
    startedAt: at,
    startedBy: personId,
    updatedAt: at,
  };
}

function stepsOf(facts: MixFacts, plan: Weighable): Pick<Weighing, 'remaining' | 'leftovers'> {
  const used = new Set(plan.fromBuckets.map((from) => from.bucketId));
  const compositions = new Map(
    facts.buckets.filter((bucket) => used.has(bucket.id)).map((bucket) => [bucket.id, compositionOf(bucket)]),
  );
  const order = facts.revision.parts.map((part) => part.componentId);
  return {
    remaining: planSteps(plan, order, compositions).map(toOpenStep),
    leftovers: Object.fromEntries([...compositions].map(([id, composition]) => [id, toShares(composition)])),
  };
}
