import { type Pot, fillPot } from './fill-pot.ts';
import { leastBatch } from './least-batch.ts';
import type { Milligrams } from './mass.ts';

/**
 * The first batch from `start` on that whole steps can fill; where the rounding that was let pass adds up, a later one.
 * @param held mg that lie in the pot @returns additions above 0, or undefined when the pot cannot be brought back
 */
export function fillFrom(
  pot: Pot,
  held: Milligrams,
  start: Milligrams,
): { batch: Milligrams; additions: Map<string, Milligrams> } | undefined {
  const d = pot.readability;
  const strict = leastBatch(pot.target, pot.tolerance, pot.contents, 0 as Milligrams) ?? start;
  for (const from of [start, Math.max(start, strict)]) {
    for (let tries = 0; tries <= pot.target.size; tries++) {
      const batch = (held + (Math.max(0, Math.ceil((from - held) / d)) + tries) * d) as Milligrams;
      const filled = fillPot(pot, batch);
      if (filled !== undefined) return { batch, additions: new Map([...filled].filter(([, mass]) => mass > 0)) };
    }
  }
  return undefined;
}
