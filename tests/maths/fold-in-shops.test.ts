import { expect, test } from 'vitest';
import { compositionFromMasses } from '#domain/composition.ts';
import { foldInBuckets, verifyPlan } from '#domain/fold-in.ts';
import type { Milligrams } from '#domain/mass.ts';
import { asksOf } from '#scripts/bench/fold-in-rows.ts';
import { makeShop } from '#scripts/bench/fold-in-shop.ts';

const grams = (mass: number) => (mass * 1000) as Milligrams;

test('of 120 plans for shops of a hundred leftovers all but one are proven best', () => {
  const plans = asksOf(100).flatMap((ask) =>
    Array.from({ length: 10 }, (_, seed) => {
      const problem = makeShop(seed + 11, ask);
      const plan = foldInBuckets(problem);
      expect(verifyPlan(problem, plan)).toEqual({ ok: true });
      return plan;
    }),
  );
  expect(plans).toHaveLength(120);
  expect(plans.filter((plan) => plan.status === 'gap').length).toBeLessThanOrEqual(1);
  expect(plans.filter((plan) => plan.status === 'best').length).toBeGreaterThan(90);
});

test('ten thousand buckets are filtered first: the plan is exact and says why the others were left out', () => {
  const problem = makeShop(3, {
    buckets: 10_000,
    tolerance: false,
    maximumBuckets: 2,
    worthOpening: grams(100),
  });
  const plan = foldInBuckets(problem);
  expect(verifyPlan(problem, plan)).toEqual({ ok: true });
  expect(plan.status).toBe('best');
  expect(plan.reused).toBeGreaterThan(0);
  expect(plan.excluded.length).toBeGreaterThan(9000);
});

test.each([3, 100])(
  'of a hundred leftovers that are all the same, with up to %d opened, the plan is proven',
  (maximumBuckets) => {
    const of = (base: number, white: number, blue: number) =>
      compositionFromMasses([
        { componentId: 'base', mass: base as Milligrams },
        { componentId: 'white', mass: white as Milligrams },
        { componentId: 'blue', mass: blue as Milligrams },
      ]);
    const buckets = Array.from({ length: 100 }, (_, n) => ({
      id: `b${n}`,
      usable: grams(100),
      composition: of(72, 20, 8),
    }));
    const problem = {
      target: of(70, 20, 10),
      batch: { minimum: grams(1000), maximum: grams(1000) },
      buckets,
      tolerance: new Map(),
      readability: 100 as Milligrams,
      minimumFromBucket: grams(20),
      minimumFresh: grams(2),
      sliver: grams(30),
      maximumBuckets,
      worthOpening: grams(0),
    };
    const plan = foldInBuckets(problem);
    expect(verifyPlan(problem, plan)).toEqual({ ok: true });
    expect(plan.status).toBe('best');
    // 72 of the leftover's base fit 70 of the target: 972 g at most; three tubs give 300 g.
    expect(plan.reused).toBeGreaterThan(Math.min(grams(299), maximumBuckets * grams(100)));
  },
);
