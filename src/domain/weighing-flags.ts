import { MassError, type Milligrams, milligrams } from './mass.ts';
import { type ScaleLimits, leastMassWithin, requireLimits } from './scale-limits.ts';

export type WeighingFlag = 'imprecise' | 'under-minimum' | 'over-maximum';

/**
 * What is wrong with each weight on the scale that weighs it: its k = 2 uncertainty is above ℓ of it, it is under the
 * scale's minimum, or over its maximum. A weight that is well has no entry.
 * @param weights mg @throws MassError
 */
export function flagWeights(
  weights: ReadonlyMap<string, Milligrams>,
  scaleFor: (componentId: string) => ScaleLimits,
): ReadonlyMap<string, readonly WeighingFlag[]> {
  const flags = new Map<string, readonly WeighingFlag[]>();
  for (const [id, weight] of weights) {
    const found = flagsOf(milligrams(weight), scaleFor(id));
    if (found.length > 0) flags.set(id, found);
  }
  return flags;
}

function flagsOf(weight: Milligrams, scale: ScaleLimits): WeighingFlag[] {
  requireLimits(scale);
  if (scale.maximum < scale.minimum) {
    throw new MassError(`A scale from ${scale.minimum} to ${scale.maximum} mg weighs nothing. Set its maximum.`);
  }
  const flags: WeighingFlag[] = [];
  if (weight < leastMassWithin(scale)) flags.push('imprecise');
  if (weight < scale.minimum) flags.push('under-minimum');
  if (weight > scale.maximum) flags.push('over-maximum');
  return flags;
}
