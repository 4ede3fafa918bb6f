import { type Composition, requireWhole } from './composition.ts';
import { type ErrorLimit, type Need, leastError, relativeError, windowOf } from './least-error.ts';
import { MassError, type Milligrams, milligrams, requireStep } from './mass.ts';
import { nearestStep, shareOut } from './min-max-steps.ts';
import { type StepGroup, splitSum } from './split-sum.ts';

/** Weights in mg that add up to the batch, and the largest |weight − need|/need among them. */
export interface ScaleWeights {
  weights: ReadonlyMap<string, Milligrams>;
  worstRelativeError: number;
}

/**
 * Weights that add up to the batch with the smallest worst relative error, each on the step of the scale that weighs
 * it. A step that a finer one does not divide (0.5 g beside 0.2 g) is used in its least common multiple with it.
 * @param batch mg, a multiple of the finest step @param stepFor mg @throws MassError, CompositionError
 */
export function scaleWeightsOn(
  target: Composition,
  batch: Milligrams,
  stepFor: (componentId: string) => Milligrams,
): ScaleWeights {
  requireWhole(target);
  return weighAmounts(new Map([...target].map(([id, share]) => [id, BigInt(share)] as const)), batch, stepFor);
}

/** As `scaleWeightsOn`, of amounts in any unit: each is its part of their sum. @throws MassError */
export function weighAmounts(
  amounts: ReadonlyMap<string, bigint>,
  batch: Milligrams,
  stepFor: (componentId: string) => Milligrams,
): ScaleWeights {
  const ids = [...amounts.keys()];
  const scales = groupByStep(ids, stepFor);
  const finest = scales[0]?.step ?? 1n;
  if (milligrams(batch) === 0 || BigInt(batch) % finest !== 0n) {
    throw new MassError(`The batch must be a multiple of ${finest} mg above 0, not ${batch} mg.`);
  }
  const { needs, denominator } = needsOf(amounts, batch, scales);
  const groups = (limit: ErrorLimit) => scales.map((scale) => groupOf(scale, needs, denominator, limit));
  const fits = (limit: ErrorLimit) => {
    const found = groups(limit);
    return found.every((group) => group !== undefined) && splitSum(found, BigInt(batch)) !== undefined;
  };
  const worst = leastError(needs, denominator, fits);
  if (worst === undefined) throw new MassError(`No weights on these scales add up to ${batch} mg. Take a finer scale.`);
  const sums = splitSum(groups(worst) as StepGroup[], BigInt(batch)) as bigint[];
  const weights = new Map(ids.map((id) => [id, 0 as Milligrams]));
  scales.forEach(({ step, members }, n) => {
    const own = members.map((member) => needs[member] as Need);
    const steps = shareOut(own, denominator, sums[n] as bigint, worst);
    members.forEach((member, k) =>
      weights.set(ids[member] as string, Number((steps[k] as bigint) * step) as Milligrams),
    );
  });
  return { weights, worstRelativeError: relativeError(worst) };
}

/** What one scale weighs: its step in mg, and which of the components. */
interface Weighed {
  step: bigint;
  members: number[];
}

/** Finest first; each step a multiple of the one before. */
function groupByStep(ids: readonly string[], stepFor: (componentId: string) => Milligrams): Weighed[] {
  const members = new Map<number, number[]>();
  ids.forEach((id, n) => {
    const step = stepFor(id);
    requireStep(step);
    members.set(step, [...(members.get(step) ?? []), n]);
  });
  let multiple = 1n;
  return [...members]
    .sort(([a], [b]) => a - b)
    .map(([step, own]) => {
      multiple = (multiple / greatestDivisor(multiple, BigInt(step))) * BigInt(step);
      return { step: multiple, members: own };
    });
}

/** Steps further off than all others together could be are never needed. */
function needsOf(amounts: ReadonlyMap<string, bigint>, batch: Milligrams, scales: readonly Weighed[]) {
  const parts = [...amounts.values()];
  const coarsest = scales.at(-1)?.step ?? 1n;
  const denominator = coarsest * parts.reduce((sum, part) => sum + part, 0n);
  const needs: Need[] = [];
  for (const { step, members } of scales) {
    const ratio = coarsest / step;
    const reach = BigInt(parts.length) * ratio;
    for (const member of members) {
      const need = BigInt(batch) * (parts[member] as bigint) * ratio;
      const floor = need / denominator;
      needs[member] = { need, lower: floor > reach ? floor - reach : 0n, upper: floor + reach + 1n };
    }
  }
  return { needs, denominator };
}

function groupOf(
  { step, members }: Weighed,
  needs: readonly Need[],
  denominator: bigint,
  limit: ErrorLimit,
): StepGroup | undefined {
  let [least, most, wish] = [0n, 0n, 0n];
  for (const member of members) {
    const need = needs[member] as Need;
    const [from, to] = windowOf(need, denominator, limit);
    if (from > to) return undefined;
    least += from;
    most += to;
    wish += nearestStep(need, denominator);
  }
  return { step, least, most, wish };
}

function greatestDivisor(a: bigint, b: bigint): bigint {
  return b === 0n ? a : greatestDivisor(b, a % b);
}
