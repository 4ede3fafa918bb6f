import { describe, expect, test } from 'vitest';
import { FoldInError, type FoldInPlan, type FoldInProblem, foldInBuckets, verifyPlan } from '#domain/fold-in.ts';
import { askHighs } from '#scripts/bench/ask-highs.ts';
import { foldInMip } from '#scripts/bench/fold-in-mip.ts';
import { asksOf, nameOf } from '#scripts/bench/fold-in-rows.ts';
import { makeShop } from '#scripts/bench/fold-in-shop.ts';
import { anyFoldIn } from './any-fold-in.ts';

const SECONDS = 20;

/** mg that rounding to the scale may take or give: a step a bucket and one for the fresh ink, and a millionth. */
function roundingOf(problem: FoldInProblem, plan: FoldInPlan): number {
  return problem.readability * (plan.fromBuckets.length + 1) + Math.abs(plan.objective) * 1e-6 + 1;
}

function planOrRefusal(problem: FoldInProblem): FoldInPlan | FoldInError {
  try {
    return foldInBuckets(problem);
  } catch (error) {
    if (error instanceof FoldInError) return error;
    throw error;
  }
}

describe('beside HiGHS, a general solver, on the same programs', () => {
  test.each(
    asksOf(20)
      .concat(asksOf(100))
      .map((ask) => ({ name: nameOf(ask), ask })),
  )(
    '$name: the objective is the same, the plan proven and exact',
    async ({ ask }) => {
      for (const seed of [1, 2]) {
        const problem = makeShop(seed, ask);
        const plan = foldInBuckets(problem);
        expect(plan.status).not.toBe('gap');
        expect(verifyPlan(problem, plan)).toEqual({ ok: true });
        const { finished, objective } = await askHighs(foldInMip(problem), SECONDS);
        if (!finished) continue;
        expect(Math.abs(plan.objective - objective * 1000)).toBeLessThanOrEqual(roundingOf(problem, plan));
        expect(plan.objectiveBound).toBeGreaterThanOrEqual(objective * 1000 * (1 - 1e-6) - 1);
      }
    },
    120_000,
  );

  test('any problem: never above the bound, never short of the optimum where it is called best, refused only with reason', async () => {
    const counts = { plans: 0, gaps: 0, refused: 0 };
    for (let seed = 1; seed <= 250; seed++) {
      const problem = anyFoldIn(seed);
      const plan = planOrRefusal(problem);
      const { finished, feasible, objective } = await askHighs(foldInMip(problem), SECONDS);
      if (!finished) continue;
      if (plan instanceof FoldInError) {
        counts.refused += 1;
        expect(feasible, `seed ${seed}: ${plan.message}`).toBe(false);
        continue;
      }
      counts.plans += 1;
      expect(verifyPlan(problem, plan), `seed ${seed}`).toEqual({ ok: true });
      const best = objective * 1000;
      expect(plan.objectiveBound, `seed ${seed}`).toBeGreaterThanOrEqual(best - Math.abs(best) * 1e-6 - 1);
      if (plan.status === 'gap') counts.gaps += 1;
      else expect(plan.objective, `seed ${seed}`).toBeGreaterThanOrEqual(best - roundingOf(problem, plan));
    }
    expect(counts.plans).toBeGreaterThan(150);
    expect(counts.gaps).toBeLessThanOrEqual(1);
    expect(counts.refused).toBeGreaterThan(10);
  }, 240_000);
});
