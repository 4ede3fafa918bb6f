import { type Composition, requireWhole } from './composition.ts';
import { MassError, type Milligrams, WHOLE, milligrams, requireStep } from './mass.ts';
import { type Need, minMaxSteps } from './min-max-steps.ts';

/** What a scale can show; masses in mg. `errorLimit` is ℓ, the relative weighing error that is warned about. */
export interface ScaleLimits {
  readability: Milligrams;
  repeatability: Milligrams;
  minimum: Milligrams;
  maximum: Milligrams;
  errorLimit: number;
}

/**
 * Weights on the scale's steps that add up to the batch with the smallest worst relative error.
 * @param batch mg, a multiple of `readability` @throws MassError, CompositionError
 */
export function scaleWeights(
  target: Composition,
  batch: Milligrams,
  readability: Milligrams,
): { weights: ReadonlyMap<string, Milligrams>; worstRelativeError: number } {
  requireWhole(target);
  requireStep(readability);
  if (milligrams(batch) === 0 || batch % readability !== 0) {
    throw new MassError(`The batch must be a multiple of ${readability} mg above 0, not ${batch} mg.`);
  }
  const denominator = BigInt(readability) * BigInt(WHOLE);
  const reach = BigInt(target.size);
  const needs = [...target.values()].map((share): Need => {
    const need = BigInt(batch) * BigInt(share);
    const floor = need / denominator;
    return { need, lower: floor > reach ? floor - reach : 0n, upper: floor + reach + 1n };
  });
  const found = minMaxSteps(needs, denominator, BigInt(batch) / BigInt(readability));
  if (found === undefined) throw new MassError('No weights on this scale add up to the batch.');
  const weights = new Map(
    [...target.keys()].map((id, n) => [id, (Number(found.steps[n]) * readability) as Milligrams] as const),
  );
  return { weights, worstRelativeError: found.worst };
}

/** Steps that are tried above the first guess before it is taken as it is. */
const MOST_STEPS = 200;

/**
 * The least batch of which each component can be weighed within ℓ and above the scale's minimum; "at least", since a
 * slightly larger one can fail again. m_ℓ = 2√2·√(d²/12 + s²)/ℓ (JCGM 100, two readings, k = 2).
 */
export function smallestWeighableBatch(target: Composition, scale: ScaleLimits): Milligrams {
  requireWhole(target);
  requireStep(scale.readability);
  if (!(scale.errorLimit > 0)) throw new MassError(`The error limit must be above 0, not ${scale.errorLimit}.`);
  const d = scale.readability;
  const least = Math.max(scale.minimum, leastMassWithin(scale));
  const smallestShare = Math.min(...target.values());
  let batch = Math.ceil((least * WHOLE) / smallestShare / d) * d;
  for (let tries = 0; tries < MOST_STEPS; tries++, batch += d) {
    const { weights, worstRelativeError } = scaleWeights(target, batch as Milligrams, d);
    if (worstRelativeError <= scale.errorLimit && Math.min(...weights.values()) >= scale.minimum) break;
  }
  return batch as Milligrams;
}

/** m_ℓ in mg, not rounded. */
export function leastMassWithin(scale: Pick<ScaleLimits, 'readability' | 'repeatability' | 'errorLimit'>): number {
  const { readability: d, repeatability: s, errorLimit } = scale;
  return (2 * Math.SQRT2 * Math.sqrt((d * d) / 12 + s * s)) / errorLimit;
}
