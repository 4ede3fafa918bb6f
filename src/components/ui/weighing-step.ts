import type { OpenStep, Weighing } from '#contract/weighing.ts';
import type { Composition } from '#domain/composition.ts';
import type { Milligrams, PartsPerBillion } from '#domain/mass.ts';
import type { WeighingStep } from '#domain/weighing-steps.ts';

export type Leftovers = Weighing['leftovers'];

/** A composition as the disk and the wire keep it. */
export function toShares(composition: Composition): { componentId: string; ppb: number }[] {
  return [...composition].map(([componentId, ppb]) => ({ componentId, ppb }));
}

export function fromShares(shares: readonly { componentId: string; ppb: number }[]): Composition {
  return new Map(shares.map((share) => [share.componentId, share.ppb as PartsPerBillion]));
}

/** A step as the disk keeps it; a leftover's composition lies beside the steps. */
export function toOpenStep(step: WeighingStep): OpenStep {
  if (step.kind === 'component') return { kind: 'component', componentId: step.componentId, plannedMg: step.planned };
  return { kind: 'bucket', bucketId: step.bucketId, plannedMg: step.planned, empties: step.empties };
}

/** A step as the mathematics takes it. */
export function fromOpenStep(step: OpenStep, leftovers: Leftovers): WeighingStep {
  const planned = step.plannedMg as Milligrams;
  if (step.kind === 'component') return { kind: 'component', componentId: step.componentId, planned };
  return {
    kind: 'bucket',
    bucketId: step.bucketId,
    composition: requireLeftover(leftovers, step.bucketId),
    planned,
    empties: step.empties,
  };
}

export function requireLeftover(leftovers: Leftovers, bucketId: string): Composition {
  const shares = leftovers[bucketId];
  if (shares === undefined) throw new Error('This batch does not know what its leftover held.');
  return fromShares(shares);
}
