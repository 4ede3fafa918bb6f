import { type Composition, requireWhole } from './composition.ts';
import { ceilDivide } from './least-error.ts';
import { type Milligrams, type PartsPerBillion, WHOLE, milligrams } from './mass.ts';
import { type ScaleLimits, requireLimits } from './scale-limits.ts';
import { scaleWeightsOn, weighAmounts } from './scale-weights-on.ts';
import { leastWeight, smallestWeighableBatch } from './smallest-weighable-batch.ts';

const PPB = BigInt(WHOLE);
const PERCENT = 10_000_000;
/** Strengths that are made first, in percent; then any whole percent, then tenths below one. */
const ROUND = [50, 20, 10, 5, 2, 1];
const WHOLE_PERCENTS = Array.from({ length: 49 }, (_, n) => 49 - n);
const TENTHS = Array.from({ length: 9 }, (_, n) => (9 - n) / 10);

/** A question about a component that is not in the formula, or that stands on its own as the base. */
export class LetDownError extends Error {
  override name = 'LetDownError';
}

export interface LetDownInput {
  target: Composition;
  /** mg, a multiple of the scale's readability. */
  batch: Milligrams;
  scale: ScaleLimits;
  /** The component that is too little to weigh. */
  componentId: string;
  /** What a new let-down is made with. */
  baseId: string;
  /** Let-downs that lie ready; `usable` in mg. */
  stocked: readonly { id: string; composition: Composition; usable: Milligrams }[];
}

/** A component pre-diluted so that it can be weighed. Masses in mg; what is weighed of it and of the rest is the batch. */
export interface LetDown {
  /** Of the one that lies ready; undefined: it is to be made first. */
  stockedId: string | undefined;
  composition: Composition;
  /** The component's share in it. */
  strength: PartsPerBillion;
  mass: Milligrams;
  /** Without the component, and less what the let-down brings of the others. */
  weights: ReadonlyMap<string, Milligrams>;
  worstRelativeError: number;
  /** The least batch of a new one that can be weighed and is enough. */
  make: { batch: Milligrams; weights: ReadonlyMap<string, Milligrams> } | undefined;
}

/**
 * A let-down that makes a small component weighable, the strongest that does: one that lies ready, else a new one of
 * strength c ≤ M·t_j/max(m, m_ℓ) with t_base ≥ t_j(1/c − 1) (core mathematics E). No other component may become too
 * small by it.
 * @returns undefined when the component can be weighed as it is, or no let-down helps
 * @throws MassError, CompositionError, LetDownError
 */
export function proposeLetDown(input: LetDownInput): LetDown | undefined {
  requireInput(input);
  const share = input.target.get(input.componentId) as number;
  if (input.batch * share >= leastWeight(input.scale) * WHOLE) return undefined;
  const ready = [...input.stocked].sort((a, b) => strengthOf(b, input) - strengthOf(a, input));
  for (const { id, composition, usable } of ready) {
    const found = dilutedBy(input, composition, id);
    if (found !== undefined && found.mass <= usable) return found;
  }
  for (const strength of strengthsToMake(input, share)) {
    const base = (WHOLE - strength) as PartsPerBillion;
    const composition = new Map([
      [input.componentId, strength],
      [input.baseId, base],
    ]);
    const found = dilutedBy(input, composition, undefined);
    if (found !== undefined) return { ...found, make: madeFor(input, found) };
  }
  return undefined;
}

function strengthOf({ composition }: { composition: Composition }, { componentId }: LetDownInput): PartsPerBillion {
  return composition.get(componentId) ?? (0 as PartsPerBillion);
}

function strengthsToMake({ batch, scale }: LetDownInput, share: number): PartsPerBillion[] {
  const most = (batch * share) / leastWeight(scale);
  return [...ROUND, ...WHOLE_PERCENTS, ...TENTHS]
    .map((percent) => Math.round(percent * PERCENT) as PartsPerBillion)
    .filter((strength) => strength <= most);
}

/** The batch with σ = t_j/r_j of it from the let-down, exact: amounts are in t·r_j. */
function dilutedBy(input: LetDownInput, composition: Composition, stockedId: string | undefined): LetDown | undefined {
  const { target, batch, scale, componentId } = input;
  const strength = BigInt(composition.get(componentId) ?? 0);
  const share = BigInt(target.get(componentId) ?? 0);
  if (strength === 0n || [...composition.keys()].some((id) => !target.has(id))) return undefined;
  const own = freeName(target);
  const amounts = new Map([[own, share * PPB]]);
  for (const [id, part] of target) {
    const rest = BigInt(part) * strength - share * BigInt(composition.get(id) ?? 0);
    if (rest < 0n) return undefined;
    if (rest > 0n) amounts.set(id, rest);
  }
  const { weights, worstRelativeError } = weighAmounts(amounts, batch, () => scale.readability);
  for (const [id, weight] of weights) {
    const wasEnough = id === own || batch * (target.get(id) ?? 0) >= leastWeight(scale) * WHOLE;
    if (wasEnough && weight < leastWeight(scale)) return undefined;
  }
  const rest = new Map([...weights].filter(([id]) => id !== own));
  const mass = weights.get(own) as Milligrams;
  const of = { stockedId, composition, strength: Number(strength) as PartsPerBillion };
  return { ...of, mass, weights: rest, worstRelativeError, make: undefined };
}

function madeFor({ scale }: LetDownInput, { composition, mass }: LetDown): LetDown['make'] {
  const d = scale.readability;
  const least = smallestWeighableBatch(composition, scale);
  const enough = Number(ceilDivide(BigInt(mass), BigInt(d))) * d;
  const batch = Math.max(least, enough) as Milligrams;
  return { batch, weights: scaleWeightsOn(composition, batch, () => d).weights };
}

/** A name that no component has. */
function freeName(target: Composition): string {
  let name = 'let-down';
  while (target.has(name)) name += "'";
  return name;
}

function requireInput({ target, batch, scale, componentId, baseId, stocked }: LetDownInput): void {
  requireWhole(target);
  requireLimits(scale);
  milligrams(batch);
  if (!target.has(componentId)) throw new LetDownError(`The formula has no component ${componentId} to let down.`);
  if (componentId === baseId) throw new LetDownError(`${baseId} cannot be let down with itself. Name another base.`);
  for (const { composition, usable } of stocked) {
    requireWhole(composition);
    milligrams(usable);
  }
  if (new Set(stocked.map(({ id }) => id)).size < stocked.length) {
    throw new LetDownError('A let-down stands twice in the list. Give each one once.');
  }
}
