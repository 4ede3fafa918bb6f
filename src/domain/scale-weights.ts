import type { Composition } from './composition.ts';
import type { Milligrams } from './mass.ts';
import { type ScaleWeights, scaleWeightsOn } from './scale-weights-on.ts';

export { type LetDown, proposeLetDown } from './propose-let-down.ts';
export { type ScaleLimits, leastMassWithin } from './scale-limits.ts';
export { smallestWeighableBatch } from './smallest-weighable-batch.ts';

/**
 * Weights on the steps of one scale that add up to the batch with the smallest worst relative error.
 * @param batch mg, a multiple of `readability` @throws MassError, CompositionError
 */
export function scaleWeights(target: Composition, batch: Milligrams, readability: Milligrams): ScaleWeights {
  return scaleWeightsOn(target, batch, () => readability);
}
