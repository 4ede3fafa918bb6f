import { compareProducts, floorQuotient } from './compare-products.ts';
import { type Composition, requireWhole } from './composition.ts';
import {
  type Ingredients,
  type Ratio,
  compareRatios,
  ingredientsOf,
  strictShare,
  tolerantShare,
} from './largest-share.ts';
import { type Milligrams, type PartsPerBillion, WHOLE, milligrams, partsPerBillion, requireStep } from './mass.ts';
import { ceilDivide } from './min-max-steps.ts';

/** A list of formulas that cannot be ranked. */
export class FormulaError extends Error {
  override name = 'FormulaError';
}

export interface Becoming {
  formulaId: string;
  /** The most of a batch that the bucket can be, ppb, rounded down. */
  largestShare: PartsPerBillion;
  /** mg: the least batch that takes all of the bucket, from the exact share, rounded up to the scale's step. */
  smallestBatch: Milligrams;
}

/**
 * What a bucket can become (core mathematics B): the formulas that take any of it, largest share first, then by id.
 * A formula whose smallest batch would be beyond any whole number of mg (9·10¹⁵) is left out.
 * @param bucket `usable` in mg: content minus wall loss
 * @param readability mg
 * @param toleranceFor ppb of each component of that formula, foreign ones included; what is absent is 0
 * @throws MassError, CompositionError, FormulaError
 */
export function whatItCanBecome(
  bucket: { usable: Milligrams; composition: Composition },
  formulas: readonly { id: string; target: Composition }[],
  readability: Milligrams,
  toleranceFor: (id: string) => ReadonlyMap<string, PartsPerBillion>,
): readonly Becoming[] {
  milligrams(bucket.usable);
  requireStep(readability);
  requireWhole(bucket.composition);
  requireFormulas(formulas);
  const ingredients = ingredientsOf(bucket.composition);
  const found: { becoming: Becoming; share: Ratio }[] = [];
  for (const { id, target } of formulas) {
    const share = shareOf(ingredients, target, toleranceFor(id));
    if (share === undefined) continue;
    const becoming = become(id, share, bucket.usable, readability);
    if (becoming !== undefined) found.push({ becoming, share });
  }
  found.sort((a, b) => compareRatios(b.share, a.share) || compareIds(a.becoming.formulaId, b.becoming.formulaId));
  return found.map(({ becoming }) => becoming);
}

function shareOf(
  ingredients: Ingredients,
  target: Composition,
  tolerance: ReadonlyMap<string, PartsPerBillion>,
): Ratio | undefined {
  if (tolerance.size === 0) return strictShare(ingredients, target);
  for (const off of tolerance.values()) partsPerBillion(off);
  return tolerantShare(ingredients, target, tolerance);
}

function become(formulaId: string, { over, under }: Ratio, usable: number, step: number): Becoming | undefined {
  const largestShare = floorQuotient(over, WHOLE, under) as PartsPerBillion;
  const smallestBatch = (stepsUp(usable, under, over, step) * step) as Milligrams;
  return Number.isSafeInteger(smallestBatch) ? { formulaId, largestShare, smallestBatch } : undefined;
}

/** ⌈usable·under / (over·step)⌉ */
function stepsUp(usable: number, under: number, over: number, step: number): number {
  if (!Number.isSafeInteger(over * step)) {
    return Number(ceilDivide(BigInt(usable) * BigInt(under), BigInt(over) * BigInt(step)));
  }
  const steps = floorQuotient(usable, under, over * step);
  return compareProducts(steps, over * step, usable, under) < 0 ? steps + 1 : steps;
}

function requireFormulas(formulas: readonly { id: string; target: Composition }[]): void {
  const ids = new Set<string>();
  for (const { id, target } of formulas) {
    if (ids.has(id)) throw new FormulaError(`The formula ${id} stands twice in the list. Give each one once.`);
    ids.add(id);
    requireWhole(target);
  }
}

function compareIds(a: string, b: string): number {
  return a < b ? -1 : a > b ? 1 : 0;
}
