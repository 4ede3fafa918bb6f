import type { Milligrams, PartsPerBillion } from '#domain/mass.ts';
import { WHOLE } from '#domain/mass.ts';
import type { RepairInput } from '#domain/repair-overshoot.ts';
import { type Random, seededRandom } from '#scripts/seed/random.ts';
import { formula, recipe, toleranceOf } from './fold-in-shop.ts';

const STEP = 100;

/** Half-weighed batches, the last addition 1 to 40 % too much, half of them with a tolerance. */
export function makeRepairs(seed: number, count: number): RepairInput[] {
  const random = seededRandom(seed);
  return Array.from({ length: count }, () => makeRepair(random));
}

function makeRepair(random: Random): RepairInput {
  const target = recipe(formula(random));
  const planned = (random.int(50, 500) * 10_000) as Milligrams;
  const weighed = [...target].slice(0, random.int(1, target.size));
  const contents = weighed.map(([id, share], n) => {
    const over = n === weighed.length - 1 ? 1.01 + 0.39 * random.next() : 1;
    const steps = Math.max(1, Math.round((((share / WHOLE) * planned) / STEP) * over));
    return { composition: new Map([[id, WHOLE]]), mass: (steps * STEP) as Milligrams };
  });
  return {
    target,
    planned,
    contents,
    tolerance: random.next() < 0.5 ? new Map<string, PartsPerBillion>() : toleranceOf(target),
    capacity: 1_000_000_000 as Milligrams,
    readability: STEP as Milligrams,
  };
}
