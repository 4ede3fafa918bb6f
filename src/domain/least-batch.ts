import type { Composition } from './composition.ts';
import type { Contents, Tolerance } from './fill-pot.ts';
import { type Milligrams, WHOLE } from './mass.ts';
import { ceilDivide } from './min-max-steps.ts';

const PPB = BigInt(WHOLE);

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
  const contents = withoutRounding(target, lying, rounding);
  let least = ceilDivide(held, PPB);
  for (const [id, amount] of contents) {
    const most = BigInt(target.get(id) ?? 0) + BigInt(tolerance.get(id) ?? 0);
    if (amount === 0n) continue;
    if (most === 0n) return undefined;
    const needed = ceilDivide(amount, most);
    if (needed > least) least = needed;
  }
  const root = fillingRoot(target, tolerance, contents);
  if (root === undefined) return undefined;
  return Number(root > least ? root : least) as Milligrams;
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

/**
 * The root of Σ max(p_j, M(t_j − τ_j)) = M: below it the lower edges and the surplus do not fit together. Piecewise
 * linear and convex: one component after another moves from its content to its lower edge as M grows.
 */
function fillingRoot(target: Composition, tolerance: Tolerance, contents: Contents): bigint | undefined {
  let foreign = 0n;
  for (const [id, amount] of contents) if (!target.has(id)) foreign += amount;
  const parts = [...target]
    .map(([id, share]) => ({
      edge: BigInt(share - Math.min(share, tolerance.get(id) ?? 0)),
      held: contents.get(id) ?? 0n,
    }))
    .sort((a, b) => compare(a.held * b.edge, b.held * a.edge));
  let heldAbove = foreign + parts.reduce((sum, part) => sum + part.held, 0n);
  let edges = 0n;
  // With n components at their lower edge: M·(1 − Σ edges) ≥ Σ of the other contents.
  for (let n = 0; n <= parts.length; n++) {
    const slope = PPB - edges;
    if (slope > 0n || heldAbove === 0n) {
      const root = slope > 0n ? ceilDivide(heldAbove, slope) : 0n;
      const next = parts[n];
      if (next === undefined || root * next.edge <= next.held) return root;
    }
    const moved = parts[n];
    if (moved === undefined) break;
    edges += moved.edge;
    heldAbove -= moved.held;
  }
  return undefined;
}

function compare(a: bigint, b: bigint): number {
  return a < b ? -1 : a > b ? 1 : 0;
}
