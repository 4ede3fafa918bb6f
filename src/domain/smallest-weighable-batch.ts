import { type Composition, requireWhole } from './composition.ts';
import { type Need, ceilDivide, windowOf } from './least-error.ts';
import { MassError, type Milligrams, WHOLE } from './mass.ts';
import { type ScaleLimits, leastMassWithin, requireLimits } from './scale-limits.ts';
import { scaleWeightsOn } from './scale-weights-on.ts';

const PPB = BigInt(WHOLE);
/** ℓ as a fraction of this, a trifle too large: it may only rule out what fails for certain. */
const FINE = 2 ** 52;

/**
 * The least batch, from max(m, m_ℓ)/t_j on, each of whose weights is at least m and m_ℓ and within ℓ of its need; "at
 * least", since a slightly larger one can fail again (core mathematics E). It always ends: where each need is d/ℓ and
 * d above m and m_ℓ, the steps below and above the needs are all good enough, and some of them add up.
 * @returns mg, a multiple of the readability; it may be above the scale's maximum @throws MassError, CompositionError
 */
export function smallestWeighableBatch(target: Composition, scale: ScaleLimits): Milligrams {
  requireWhole(target);
  requireLimits(scale);
  const d = scale.readability;
  for (let steps = firstSteps(target, scale); ;) {
    if (steps * d > Number.MAX_SAFE_INTEGER) {
      throw new MassError('No batch is large enough to weigh the smallest component on this scale. Take a finer one.');
    }
    const next = stepsThatMay(target, scale, steps);
    if (next === steps && isWeighable(target, scale, (steps * d) as Milligrams)) return (steps * d) as Milligrams;
    steps = next > steps ? next : steps + 1;
  }
}

/** mg, not rounded: max(m, m_ℓ). */
export function leastWeight(scale: ScaleLimits): number {
  return Math.max(scale.minimum, leastMassWithin(scale));
}

function isWeighable(target: Composition, scale: ScaleLimits, batch: Milligrams): boolean {
  const { weights, worstRelativeError } = scaleWeightsOn(target, batch, () => scale.readability);
  const least = leastWeight(scale);
  return worstRelativeError <= scale.errorLimit && [...weights.values()].every((weight) => weight >= least);
}

function firstSteps(target: Composition, scale: ScaleLimits): number {
  const smallest = Math.min(...target.values());
  const [d, m] = [scale.readability, scale.minimum];
  const forMinimum = Number(ceilDivide(BigInt(m) * PPB, BigInt(smallest) * BigInt(d)));
  return Math.max(1, forMinimum, Math.ceil((leastMassWithin(scale) * WHOLE) / smallest / d));
}

/** `steps`, or the next number of steps that is not certain to fail. */
function stepsThatMay(target: Composition, scale: ScaleLimits, steps: number): number {
  return Math.max(stepsByLimit(target, scale, steps), stepsByMinimum(target, scale, steps));
}

/** Within ℓ the components weigh together at least this much, and more in a larger batch. */
function stepsByLimit(target: Composition, scale: ScaleLimits, steps: number): number {
  const limit = { error: BigInt(Math.ceil(scale.errorLimit * FINE) + 1), need: BigInt(FINE) };
  let [least, most] = [0n, 0n];
  for (const share of target.values()) {
    const need: Need = { need: BigInt(steps) * BigInt(share), lower: 0n, upper: BigInt(steps) };
    const [from, to] = windowOf(need, PPB, limit);
    least += from;
    most += to;
  }
  return most < BigInt(steps) ? steps + 1 : Math.max(steps, Number(least));
}

/**
 * A component that is nearer to the step below its least weight than to the one above stays below, as long as another
 * is so large that it takes up all rounding at less than what half a step costs the small one.
 */
function stepsByMinimum(target: Composition, scale: ScaleLimits, steps: number): number {
  const shares = [...target.values()];
  const [smallest, largest] = [Math.min(...shares), Math.max(...shares)];
  const least = BigInt(Math.ceil(leastWeight(scale) / scale.readability));
  if (BigInt(steps) * BigInt(largest) <= BigInt(shares.length + 3) * least * PPB) return steps;
  return Math.max(steps, Number(ceilDivide((2n * least - 1n) * PPB, 2n * BigInt(smallest))));
}
