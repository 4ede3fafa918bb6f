import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { type Composition, compositionFromMasses, compositionFromParts } from './composition.ts';
import { FoldInError, type FoldInProblem, foldInBuckets, searchFoldIn, verifyPlan } from './fold-in.ts';
import type { Milligrams, PartsPerBillion } from './mass.ts';

const mg = (grams: number) => Math.round(grams * 1000) as Milligrams;
const IDS = ['base', 'white', 'blue', 'red'];
const of = (parts: readonly number[]): Composition =>
  compositionFromMasses(parts.map((mass, n) => ({ componentId: IDS[n] as string, mass: mass as Milligrams })));
const every = (tau: number) => new Map(IDS.map((id) => [id, tau as PartsPerBillion]));

function problem(given: Partial<FoldInProblem>): FoldInProblem {
  return {
    target: of([70, 20, 10]),
    batch: { minimum: mg(1000), maximum: mg(1000) },
    buckets: [],
    tolerance: new Map(),
    readability: mg(0.1),
    minimumFromBucket: mg(20),
    minimumFresh: mg(0),
    sliver: mg(20),
    maximumBuckets: 3,
    worthOpening: mg(0),
    ...given,
  };
}

const anyBuckets = fc
  .array(
    fc.record({
      usable: fc.integer({ min: 20_000, max: 900_000 }),
      parts: fc
        .array(fc.integer({ min: 0, max: 50 }), { minLength: 3, maxLength: 4 })
        .filter((parts) => parts.some((part) => part > 0)),
    }),
    { minLength: 1, maxLength: 10 },
  )
  .map((list) =>
    list.map(({ usable, parts }, n) => ({ id: `b${n}`, usable: usable as Milligrams, composition: of(parts) })),
  );

describe('a fold-in plan', () => {
  test('re-uses no less with one more bucket, or with more tolerance, beyond what rounding takes', () => {
    fc.assert(
      fc.property(anyBuckets, fc.integer({ min: 0, max: 20_000_000 }), (buckets, tau) => {
        const plans = [
          foldInBuckets(problem({ buckets: buckets.slice(1), tolerance: every(tau) })),
          foldInBuckets(problem({ buckets, tolerance: every(tau) })),
          foldInBuckets(problem({ buckets, tolerance: every(2 * tau) })),
        ];
        fc.pre(plans.every((plan) => plan.status !== 'gap'));
        const [fewer, given, looser] = plans.map((plan) => plan.reused);
        const rounding = mg(0.1) * 4 + 1;
        expect(given).toBeGreaterThanOrEqual((fewer ?? 0) - rounding);
        expect(looser).toBeGreaterThanOrEqual((given ?? 0) - rounding);
      }),
    );
  });

  test('in a range of batches takes the mass that needs the least fresh ink', () => {
    const given = problem({
      batch: { minimum: mg(500), maximum: mg(1500) },
      buckets: [{ id: 'same', usable: mg(1200), composition: of([70, 20, 10]) }],
    });
    const plan = foldInBuckets(given);
    expect(verifyPlan(given, plan)).toEqual({ ok: true });
    expect(plan.fresh.size).toBe(0);
    expect(plan).toMatchObject({ status: 'best', objective: 0 });
  });

  test('builds on the tub that must be used', () => {
    const buckets = [
      { id: 'better', usable: mg(900), composition: of([70, 20, 10]) },
      { id: 'this', usable: mg(250), composition: of([80, 20, 0]), mustUse: true },
    ];
    const plan = foldInBuckets(problem({ buckets, maximumBuckets: 1 }));
    expect(plan.fromBuckets).toEqual([{ bucketId: 'this', mass: mg(250), empties: true }]);
  });

  test('says by name that a tub that must be used does not fit', () => {
    const buckets = [{ id: 'this', usable: mg(900), composition: of([0, 0, 1]), mustUse: true }];
    expect(() => foldInBuckets(problem({ buckets }))).toThrow(FoldInError);
  });

  test('leaves no component with less fresh ink than the scale can weigh', () => {
    // 980 g of the tub would leave 2 g of blue to add: under the 5 g that can be weighed.
    const given = problem({
      buckets: [{ id: 'pale', usable: mg(980), composition: of([7140, 2040, 820]) }],
      minimumFresh: mg(5),
    });
    const plan = foldInBuckets(given);
    expect(verifyPlan(given, plan)).toEqual({ ok: true });
    for (const mass of plan.fresh.values()) expect(mass).toBeGreaterThanOrEqual(mg(5));
  });

  test.each([
    [1, 1],
    [1_000_000_000, 100],
  ])('of %d mg on a scale of %d mg is found', (batch, step) => {
    const given = problem({
      batch: { minimum: batch as Milligrams, maximum: batch as Milligrams },
      buckets: [{ id: 'same', usable: batch as Milligrams, composition: of([70, 20, 10]) }],
      readability: step as Milligrams,
      minimumFromBucket: 0 as Milligrams,
    });
    expect(foldInBuckets(given)).toMatchObject({ status: 'best', reused: batch });
  });

  test('uses a tub of 24 components within tolerance, and not at all for the same recipe', () => {
    const parts = Array.from({ length: 24 }, (_, n) => ({ componentId: `c${n}`, parts: n === 0 ? '977' : '1' }));
    const blend = compositionFromParts(parts);
    const target = compositionFromParts([{ componentId: 'c0', parts: '1' }]);
    const tolerance = new Map(parts.map(({ componentId }) => [componentId, 2_000_000 as PartsPerBillion]));
    tolerance.set('c0', 30_000_000 as PartsPerBillion);
    const given = problem({ target, buckets: [{ id: 'all', usable: mg(300), composition: blend }] });
    expect(foldInBuckets(given)).toMatchObject({ status: 'none', reused: 0 });
    expect(foldInBuckets({ ...given, tolerance })).toMatchObject({ status: 'best', reused: mg(300) });
  });

  test('that is found on the way has a bound too, and verifies', () => {
    const buckets = Array.from({ length: 60 }, (_, n) => ({
      id: `b${n}`,
      usable: (31_000 + 977 * n) as Milligrams,
      composition: of([60 + ((n * 7) % 13), 15 + ((n * 5) % 11), 6 + ((n * 3) % 8)]),
    }));
    const given = problem({ buckets, maximumBuckets: 6 });
    const search = searchFoldIn(given);
    let step = search.next();
    const first = step;
    while (!step.done) step = search.next();
    if (!first.done) {
      expect(verifyPlan(given, first.value.plan)).toEqual({ ok: true });
      expect(first.value.bound).toBeGreaterThanOrEqual(step.value.objective);
    }
    expect(step.value.objectiveBound).toBeGreaterThanOrEqual(step.value.objective);
  });
});
