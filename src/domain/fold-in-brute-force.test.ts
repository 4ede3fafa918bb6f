import fc from 'fast-check';
import { expect, test } from 'vitest';
import { type Composition, compositionFromParts } from './composition.ts';
import { type FoldInProblem, foldInBuckets, verifyPlan } from './fold-in.ts';
import type { Milligrams, PartsPerBillion } from './mass.ts';

/** Small enough to try everything: two to three components, up to three buckets, a scale of 1 g. */
const IDS = ['base', 'blue', 'red'];
const STEP = 1000;
const WHOLE = 1_000_000_000n;

const anyParts = fc.array(fc.constantFrom(0, 1, 2, 5, 10), { minLength: 3, maxLength: 3 });
const anyComposition = anyParts
  .filter((parts) => parts.some((part) => part > 0))
  .map((parts): Composition =>
    compositionFromParts(IDS.map((componentId, n) => ({ componentId, parts: String(parts[n]) }))),
  );
const mg = (steps: number) => (steps * STEP) as Milligrams;
const anyProblem = fc
  .record({
    target: anyComposition,
    batch: fc.integer({ min: 5, max: 40 }),
    usable: fc.array(fc.integer({ min: 1, max: 30 }), { minLength: 1, maxLength: 3 }),
    compositions: fc.array(anyComposition, { minLength: 3, maxLength: 3 }),
    tau: fc.constantFrom(0, 0, 10_000_000, 60_000_000),
    minimumFresh: fc.integer({ min: 0, max: 3 }),
    minimumFromBucket: fc.integer({ min: 1, max: 4 }),
    sliver: fc.integer({ min: 0, max: 3 }),
    maximumBuckets: fc.integer({ min: 1, max: 3 }),
    worthOpening: fc.constantFrom(0, 0, 3),
  })
  .map((any): FoldInProblem => ({
    target: any.target,
    batch: { minimum: mg(any.batch), maximum: mg(any.batch) },
    buckets: any.usable.map((usable, n) => ({
      id: `b${n}`,
      usable: mg(usable),
      composition: any.compositions[n] as Composition,
    })),
    tolerance: new Map(any.tau === 0 ? [] : IDS.map((id) => [id, any.tau as PartsPerBillion])),
    readability: mg(1),
    minimumFresh: mg(any.minimumFresh),
    minimumFromBucket: mg(any.minimumFromBucket),
    sliver: mg(any.sliver),
    maximumBuckets: any.maximumBuckets,
    worthOpening: mg(any.worthOpening),
  }));

/** Every way to take whole grams of the buckets: the greatest objective whose rest can be filled up exactly. */
function bruteForce(problem: FoldInProblem): number {
  let best = 0;
  const walk = (n: number, taken: readonly number[]) => {
    const bucket = problem.buckets[n];
    if (bucket === undefined) {
      const opened = taken.filter((mass) => mass > 0).length;
      const objective = taken.reduce((a, b) => a + b, 0) - opened * problem.worthOpening;
      if (objective > best && opened <= problem.maximumBuckets && canFillUp(problem, taken)) best = objective;
      return;
    }
    walk(n + 1, [...taken, 0]);
    for (let mass = problem.minimumFromBucket as number; mass <= bucket.usable - problem.sliver; mass += STEP)
      walk(n + 1, [...taken, mass]);
    walk(n + 1, [...taken, bucket.usable]);
  };
  walk(0, []);
  return best;
}

/** Is there fresh ink for the rest, each component none or enough? Tries every set of components that get none. */
function canFillUp(problem: FoldInProblem, taken: readonly number[]): boolean {
  const batch = BigInt(problem.batch.maximum);
  const rest = (batch - BigInt(taken.reduce((a, b) => a + b, 0))) * WHOLE;
  if (rest < 0n) return false;
  for (let none = 0; none < 2 ** IDS.length; none++) {
    let least = 0n;
    let most = 0n;
    const possible = IDS.every((id, j) => {
      const share = BigInt(problem.target.get(id) ?? 0);
      const tau = BigInt(problem.tolerance.get(id) ?? 0);
      const held = taken.reduce(
        (sum, mass, n) => sum + BigInt(mass) * BigInt(problem.buckets[n]?.composition.get(id) ?? 0),
        0n,
      );
      const low = batch * (share > tau ? share - tau : 0n) - held;
      const high = batch * (share + tau) - held;
      if ((none >> j) % 2 === 1 || share === 0n) return low <= 0n && high >= 0n;
      const enough = least0(BigInt(problem.minimumFresh) * WHOLE, batch * share);
      least += low > enough ? low : enough;
      most += high;
      return high >= enough && high >= low;
    });
    if (possible && least <= rest && rest <= most) return true;
  }
  return false;
}

function least0(a: bigint, b: bigint): bigint {
  return a < b ? a : b;
}

test('no way of taking whole grams of the buckets beats the bound, nor a plan that is called best', () => {
  const counts = { best: 0, none: 0, gap: 0 };
  fc.assert(
    fc.property(anyProblem, (problem) => {
      const plan = foldInBuckets(problem);
      counts[plan.status] += 1;
      const most = bruteForce(problem);
      expect(verifyPlan(problem, plan)).toEqual({ ok: true });
      expect(plan.objectiveBound).toBeGreaterThanOrEqual(most);
      if (plan.status === 'gap') return;
      expect(plan.objective).toBeGreaterThanOrEqual(most - (plan.fromBuckets.length + 1) * STEP - 1);
    }),
    { numRuns: 400 },
  );
  expect(counts.best).toBeGreaterThan(50);
  expect(counts.gap).toBeLessThan(counts.best / 10);
});
