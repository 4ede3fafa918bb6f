import type { Composition } from '#domain/composition.ts';
import type { PartsPerBillion } from '#domain/mass.ts';
import { seededRandom } from '#scripts/seed/random.ts';
import { formula, recipe, toleranceOf, variant } from './fold-in-shop.ts';

export interface BookEntry {
  id: string;
  target: Composition;
  tolerance: ReadonlyMap<string, PartsPerBillion>;
}

/** A shop's formulas, four shades of each colour. */
export function makeBook(seed: number, count: number): BookEntry[] {
  const random = seededRandom(seed);
  let colour = formula(random);
  return Array.from({ length: count }, (_, n) => {
    if (n % 4 === 0) colour = formula(random);
    const target = recipe(variant(random, colour));
    return { id: `formula-${n}`, target, tolerance: toleranceOf(target) };
  });
}
