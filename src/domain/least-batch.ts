import type { Composition } from './composition.ts';
import type { Contents, Tolerance } from './fill-pot.ts';
import { ceilDivide } from './least-error.ts';
import type { Milligrams } from './mass.ts';
import { PPB, leastTotal, partsOf } from './repair-pot.ts';

/**
 * M' of core mathematics C: the least final batch, rounded up to whole mg, that what lies in the pot can become within
 * the tolerances; undefined when a component that the formula does not have is beyond its own tolerance for good.
 * @param rounding mg that each of the formula's components may be over: the step of the scale that weighed it
 */
export function leastBatch(
  target: Composition,
  tolerance: Tolerance,
  lying: Contents,
  rounding: Milligrams,
): Milligrams | undefined {
  const held = [...lying.values()].reduce((a, b) => a + b, 0n);
  const parts = partsOf(withoutRounding(target, lying, rounding), target, tolerance);
  const least = leastTotal({ parts, mass: ceilDivide(held, PPB), scale: 1n }, 0n, 1n);
  return least === undefined ? undefined : (Number(least) as Milligrams);
}

/** One step over is what rounding to the scale does; no foreign component is excused by it. */
function withoutRounding(target: Composition, contents: Contents, rounding: Milligrams): Contents {
  const excused = BigInt(rounding) * PPB;
  return new Map(
    [...contents].map(([id, amount]) => {
      if (!target.has(id)) return [id, amount];
      return [id, amount > excused ? amount - excused : 0n];
    }),
  );
}
