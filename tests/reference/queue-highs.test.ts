import { expect, test } from 'vitest';
import type { Milligrams } from '#domain/mass.ts';
import { searchQueue, verifyQueue } from '#domain/plan-queue.ts';
import { askHighs } from '#scripts/bench/ask-highs.ts';
import { PROGRAM_UNIT, queueMip } from '#scripts/bench/queue-mip.ts';
import { makeQueueShop } from '#scripts/bench/queue-shop.ts';

const mg = (grams: number) => (grams * 1000) as Milligrams;
/** Steps of the scale that rounding may take: one a bucket, in five batches of three. */
const ROUNDING = 15 * mg(0.1);

// HiGHS (MIT), run here to its end: the optimum of the same queue as a mixed-integer program.
test.each([
  [1, false, 0],
  [2, false, 0],
  [3, false, 100],
  [4, true, 0],
  [5, true, 100],
])('shop %i (tolerance %s, κ %i g): reuses what HiGHS does, within its bound', async (seed, tolerance, worth) => {
  const ask = { buckets: 30, batches: 5, tolerance, maximumBuckets: 3, worthOpening: mg(worth), minimumFresh: mg(2) };
  const problem = makeQueueShop(seed, ask);
  const search = searchQueue(problem);
  let step = search.next();
  while (!step.done) step = search.next();
  const { plans, reused, bound } = step.value;
  const objective = [...plans.values()].reduce((sum, plan) => sum + plan.objective, 0);
  const highs = await askHighs(queueMip(problem), 60);
  const optimum = highs.objective * PROGRAM_UNIT;
  expect(highs.finished).toBe(true);
  expect(verifyQueue(problem, plans)).toEqual({ ok: true });
  expect(objective).toBeGreaterThanOrEqual(0.985 * optimum - ROUNDING);
  expect(objective + bound - reused).toBeGreaterThanOrEqual(optimum * (1 - 1e-7) - 1);
  expect(objective).toBeLessThanOrEqual(optimum + ROUNDING);
  expect(optimum).toBeGreaterThan(0);
});
