import { expect, test } from 'vitest';
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
