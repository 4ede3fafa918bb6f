import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { type Composition, compositionFromMasses } from './composition.ts';
import { type FoldInProblem, foldInBuckets, verifyPlan } from './fold-in.ts';
import type { Milligrams, PartsPerBillion } from './mass.ts';

const mg = (grams: number) => Math.round(grams * 1000) as Milligrams;

function of(parts: Record<string, number>): Composition {
  return compositionFromMasses(
    Object.entries(parts).map(([componentId, mass]) => ({ componentId, mass: mass as Milligrams })),
  );
}

function problem(given: Partial<FoldInProblem> & Pick<FoldInProblem, 'target' | 'buckets'>): FoldInProblem {
  return {
    batch: { minimum: mg(600), maximum: mg(600) },
    tolerance: new Map(),
    readability: mg(0.1),
    minimumFromBucket: mg(20),
    minimumFresh: mg(0),
    sliver: mg(20),
    maximumBuckets: 2,
    worthOpening: mg(100),
    ...given,
  };
}

const target = of({ base: 70, white: 20, blue: 10 });

describe('fold-in', () => {
  test('a lighter leftover of the same components is emptied, and the rest is fresh', () => {
    const given = problem({
      target,
      buckets: [{ id: 'sky', usable: mg(186.4), composition: of({ base: 78, white: 20, blue: 2 }) }],
    });
    const plan = foldInBuckets(given);
    expect(plan.fromBuckets).toEqual([{ bucketId: 'sky', mass: mg(186.4), empties: true }]);
    expect(plan.status).toBe('best');
    expect(plan.batch).toBe(mg(600));
    expect(verifyPlan(given, plan)).toEqual({ ok: true });
  });

  test('a darker leftover goes in up to the share that the target allows', () => {
    const given = problem({
      target,
      buckets: [{ id: 'deep', usable: mg(900), composition: of({ base: 60, white: 20, blue: 20 }) }],
    });
    const plan = foldInBuckets(given);
    expect(plan.fromBuckets).toEqual([{ bucketId: 'deep', mass: mg(300), empties: false }]);
    expect(plan.status).toBe('best');
  });

  test('a foreign component keeps a bucket out, with its reason', () => {
    const plan = foldInBuckets(
      problem({ target, buckets: [{ id: 'red', usable: mg(500), composition: of({ base: 90, red: 10 }) }] }),
    );
    expect(plan.status).toBe('none');
    expect(plan.excluded).toEqual([{ bucketId: 'red', reason: 'Holds a component that this formula does not take.' }]);
    expect(plan.batch).toBe(mg(600));
  });

  test('a bucket that saves less than it costs to open stays closed', () => {
    const plan = foldInBuckets(problem({ target, buckets: [{ id: 'little', usable: mg(60), composition: target }] }));
    expect(plan.fromBuckets).toEqual([]);
    expect(plan.excluded[0]?.reason).toBe('Would save 60.0 g: not worth opening.');
  });

  test('a batch can be made wholly of leftovers', () => {
    const plan = foldInBuckets(problem({ target, buckets: [{ id: 'same', usable: mg(600), composition: target }] }));
    expect(plan.reused).toBe(mg(600));
    expect([...plan.fresh.values()]).toEqual([]);
  });

  test('a tub of one milligram opens nothing where no tub may be opened', () => {
    const given = problem({
      target,
      batch: { minimum: mg(1), maximum: mg(1) },
      buckets: [{ id: 'dust', usable: 1 as Milligrams, composition: of({ blue: 1 }) }],
      maximumBuckets: 0,
      worthOpening: 0 as Milligrams,
    });
    const plan = foldInBuckets(given);
    expect(plan.fromBuckets).toEqual([]);
    expect(verifyPlan(given, plan)).toEqual({ ok: true });
  });

  test.each([
    ['a negative mass', { buckets: [{ id: 'a', usable: -1 as Milligrams, composition: target }] }],
    ['a bucket that stands twice', { buckets: [1, 2].map(() => ({ id: 'a', usable: mg(1), composition: target })) }],
    ['a step of 0', { readability: 0 as Milligrams }],
    ['a batch between two steps', { batch: { minimum: 1 as Milligrams, maximum: 1 as Milligrams } }],
    ['shares that do not add up', { target: new Map([['a', 5 as PartsPerBillion]]) }],
  ])('%s is refused by name', (_, given) => {
    expect(() => foldInBuckets(problem({ target, buckets: [], ...given }))).toThrow(
      /bucket|step|multiple|shares|whole/i,
    );
  });
});

const IDS = ['base', 'white', 'blue', 'red', 'black'];
const anyComposition = fc
  .array(fc.integer({ min: 0, max: 100 }), { minLength: 5, maxLength: 5 })
  .filter((parts) => parts.some((part) => part > 0))
  .map((parts) => of(Object.fromEntries(IDS.map((id, n) => [id, parts[n] ?? 0]))));
const anyProblem = fc.record({
  target: anyComposition,
  buckets: fc.array(fc.record({ usable: fc.integer({ min: 0, max: 900_000 }), composition: anyComposition }), {
    maxLength: 8,
  }),
  tau: fc.integer({ min: 0, max: 30_000_000 }),
  batch: fc.integer({ min: 10, max: 9000 }),
  maximumBuckets: fc.integer({ min: 0, max: 4 }),
  worthOpening: fc.constantFrom(0, 100_000),
  minimumFresh: fc.constantFrom(0, 2000),
});

function fromAny(any: typeof anyProblem extends fc.Arbitrary<infer T> ? T : never): FoldInProblem {
  const batch = (any.batch * 100) as Milligrams;
  return problem({
    target: any.target,
    batch: { minimum: batch, maximum: batch },
    buckets: any.buckets.map((bucket, n) => ({
      id: `b${n}`,
      usable: bucket.usable as Milligrams,
      composition: bucket.composition,
    })),
    tolerance: any.tau === 0 ? new Map() : new Map(IDS.map((id) => [id, any.tau as PartsPerBillion])),
    maximumBuckets: any.maximumBuckets,
    worthOpening: any.worthOpening as Milligrams,
    minimumFresh: any.minimumFresh as Milligrams,
  });
}

describe('every plan', () => {
  test('verifies in exact arithmetic and keeps below its bound', () => {
    fc.assert(
      fc.property(anyProblem, (any) => {
        const given = fromAny(any);
        const plan = foldInBuckets(given);
        expect(verifyPlan(given, plan)).toEqual({ ok: true });
        expect(plan.objectiveBound).toBeGreaterThanOrEqual(plan.objective);
      }),
      { numRuns: 300 },
    );
  });

  test('is at least as good as any single bucket tried on a grid', () => {
    fc.assert(
      fc.property(anyProblem, (any) => {
        const given = { ...fromAny(any), worthOpening: 0 as Milligrams, minimumFresh: 0 as Milligrams };
        if (given.maximumBuckets === 0) return;
        const plan = foldInBuckets(given);
        for (const bucket of given.buckets) {
          for (let part = 1; part <= 20; part++) {
            const mass = bucket.usable * (part / 20);
            if (mass < given.minimumFromBucket || (part < 20 && mass > bucket.usable - given.sliver)) continue;
            if (fits(given, bucket.composition, mass))
              expect(plan.objectiveBound).toBeGreaterThanOrEqual(Math.floor(mass) - 1);
          }
        }
      }),
      { numRuns: 200 },
    );
  });
});

/** By hand: this much of one bucket, and every component within its limits after the rest is filled up. */
function fits(given: FoldInProblem, composition: Composition, mass: number): boolean {
  const batch = given.batch.maximum;
  if (mass > batch) return false;
  let least = 0;
  for (const id of IDS) {
    const share = (given.target.get(id) ?? 0) / 1e9;
    const tau = (given.tolerance.get(id) ?? 0) / 1e9;
    const held = (mass * (composition.get(id) ?? 0)) / 1e9;
    if (held > batch * (share + tau)) return false;
    least += Math.max(held, batch * Math.max(0, share - tau));
  }
  return least <= batch;
}
