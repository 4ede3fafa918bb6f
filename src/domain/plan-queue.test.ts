import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { type Composition, compositionFromMasses } from './composition.ts';
import { FoldInError, type FoldInPlan, verifyPlan } from './fold-in.ts';
import type { Milligrams, PartsPerBillion } from './mass.ts';
import { type QueuePlans, type QueueProblem, searchQueue, verifyQueue } from './plan-queue.ts';

type Batch = QueueProblem['batches'][number];
const mg = (grams: number) => Math.round(grams * 1000) as Milligrams;
const IDS = ['base', 'white', 'blue', 'red'];
const of = (parts: readonly number[]): Composition =>
  compositionFromMasses(parts.map((mass, n) => ({ componentId: IDS[n] as string, mass: mass as Milligrams })));
const every = (tau: number) => new Map(IDS.map((id) => [id, tau as PartsPerBillion]));
const sky = of([70, 20, 10]);
const rose = of([70, 20, 0, 10]);

function batch(id: string, given: Partial<Batch> = {}): Batch {
  return {
    id,
    target: sky,
    batch: { minimum: mg(1000), maximum: mg(1000) },
    tolerance: new Map(),
    readability: mg(0.1),
    minimumFromBucket: mg(20),
    minimumFresh: mg(0),
    sliver: mg(30),
    maximumBuckets: 3,
    worthOpening: mg(0),
    ...given,
  };
}

const bucket = (id: string, grams: number, composition = sky, mustUse = false) => ({
  id,
  usable: mg(grams),
  composition,
  mustUse,
});

function planned(problem: QueueProblem): QueuePlans {
  const search = searchQueue(problem);
  for (;;) {
    const step = search.next();
    if (step.done) return step.value;
  }
}

const taken = (found: QueuePlans, id: string) => found.plans.get(id)?.fromBuckets ?? [];

/** Each batch against its own problem, with the buckets as the batches before it have left them. */
function verdictsOneAfterAnother(problem: QueueProblem, plans: ReadonlyMap<string, FoldInPlan>) {
  const left = new Map(problem.buckets.map(({ id, usable }) => [id, usable as number]));
  return problem.batches.map((each) => {
    const plan = plans.get(each.id) as FoldInPlan;
    const buckets = problem.buckets.map((one) => ({ ...one, mustUse: false, usable: left.get(one.id) as Milligrams }));
    for (const { bucketId, mass } of plan.fromBuckets) left.set(bucketId, (left.get(bucketId) as number) - mass);
    return verifyPlan({ ...each, buckets }, plan);
  });
}

describe('a queue of batches', () => {
  test('that is empty has no plans and reuses nothing', () => {
    expect(planned({ batches: [], buckets: [bucket('a', 500)] })).toMatchObject({
      plans: new Map(),
      reused: 0,
      bound: 0,
    });
  });

  test('without buckets has a full fresh plan for each batch', () => {
    const found = planned({ batches: [batch('one'), batch('two', { target: rose })], buckets: [] });
    expect([...found.plans.keys()]).toEqual(['one', 'two']);
    expect(found.plans.get('two')).toMatchObject({ status: 'none', reused: 0, fromBuckets: [] });
    expect(found.plans.get('two')?.fresh).toEqual(
      new Map([
        ['base', mg(700)],
        ['white', mg(200)],
        ['red', mg(100)],
      ]),
    );
  });

  test('shares a bucket: the one before takes a part on the step, the last one empties it', () => {
    const problem = { batches: [batch('one'), batch('two')], buckets: [bucket('big', 1500.037)] };
    const found = planned(problem);
    expect(found.reused).toBe(mg(1500.037));
    expect(verifyQueue(problem, found.plans)).toEqual({ ok: true });
    expect(verdictsOneAfterAnother(problem, found.plans)).toEqual([{ ok: true }, { ok: true }]);
    expect(taken(found, 'one')[0]?.empties).toBe(false);
    expect(taken(found, 'two')[0]?.empties).toBe(true);
  });

  test('leaves a bucket to the batch that has no other', () => {
    const only = batch('only', { allowed: new Set(['shared']), maximumBuckets: 1 });
    const buckets = [bucket('shared', 1000), bucket('other', 900)];
    const found = planned({ batches: [batch('free', { maximumBuckets: 1 }), only], buckets });
    expect(taken(found, 'free').map((from) => from.bucketId)).toEqual(['other']);
    expect(taken(found, 'only').map((from) => from.bucketId)).toEqual(['shared']);
  });

  test('leaves no sliver of a bucket, whoever takes of it', () => {
    const problem = { batches: [batch('one'), batch('two')], buckets: [bucket('big', 2010)] };
    const found = planned(problem);
    expect(verifyQueue(problem, found.plans)).toEqual({ ok: true });
    expect(found.reused).toBe(mg(1980));
  });

  test('opens no bucket that saves less than it is worth', () => {
    const given = { worthOpening: mg(100) };
    const buckets = [bucket('little', 90), bucket('much', 150)];
    const found = planned({ batches: [batch('one', given), batch('two', given)], buckets });
    expect(found.reused).toBe(mg(150));
    expect(found.bound - found.reused).toBeLessThan(mg(0.1));
  });

  test('makes batches that may lie in a range as small as they need be', () => {
    const given = { batch: { minimum: mg(500), maximum: mg(900) } };
    const problem = {
      batches: [batch('one', given), batch('two', given)],
      buckets: [bucket('a', 820), bucket('b', 450)],
    };
    const found = planned(problem);
    expect(verifyQueue(problem, found.plans)).toEqual({ ok: true });
    const fresh = [...found.plans.values()].reduce((sum, plan) => sum + plan.batch - plan.reused, 0);
    expect(fresh).toBeLessThanOrEqual(mg(50));
  });

  test('is planned the same each time', () => {
    const batches = ['one', 'two', 'three'].map((id, n) => batch(id, { target: n === 1 ? rose : sky }));
    const buckets = Array.from({ length: 12 }, (_, n) =>
      bucket(`b${n}`, 90 + 37 * n, of([70, 20 + (n % 3), 9, n % 2])),
    );
    const problem = { batches: batches.map((each) => ({ ...each, tolerance: every(20_000_000) })), buckets };
    expect(planned(problem)).toEqual(planned(problem));
  });
});

describe('a bucket that must be used up', () => {
  test('is emptied although another would save more', () => {
    const found = planned({
      batches: [batch('one', { maximumBuckets: 1 })],
      buckets: [bucket('better', 900), bucket('this', 250, of([80, 20]), true)],
    });
    expect(taken(found, 'one')).toEqual([{ bucketId: 'this', mass: mg(250), empties: true }]);
  });

  test('is emptied by several batches when none can alone', () => {
    const problem = {
      batches: [batch('one'), batch('two'), batch('other', { target: rose })],
      buckets: [bucket('this', 1900, sky, true), bucket('small', 300)],
    };
    const found = planned(problem);
    expect(verifyQueue(problem, found.plans)).toEqual({ ok: true });
    expect(taken(found, 'one').length).toBe(1);
    expect(taken(found, 'two').map((from) => from.bucketId)).toContain('this');
  });

  test('that fits no batch is told by name', () => {
    const buckets = [bucket('odd', 200, of([0, 0, 0, 1]), true)];
    expect(() => planned({ batches: [batch('one')], buckets })).toThrow(FoldInError);
    expect(() => planned({ batches: [batch('one')], buckets })).toThrow(/odd/);
    expect(() => planned({ batches: [], buckets })).toThrow(/odd/);
  });
});

test.each<[string, Partial<QueueProblem>, RegExp]>([
  ['two batches of one name', { batches: [batch('one'), batch('one')] }, /one stands twice/],
  ['two buckets of one name', { buckets: [bucket('a', 1), bucket('a', 2)] }, /stands twice/],
  ['an unknown bucket', { batches: [batch('one', { allowed: new Set(['b']) })] }, /b, which is not on the shelf/],
  ['a mass that is no number', { buckets: [bucket('a', Number.NaN)] }, /whole mg/],
  ['a negative mass', { buckets: [bucket('a', -1)] }, /whole mg/],
  ['a scale without a step', { batches: [batch('one', { readability: mg(0) })] }, /Batch one: .*step/],
  ['a batch off the step', { batches: [batch('one', { readability: mg(0.3) })] }, /Batch one: .*multiple/],
  ['an endless count', { batches: [batch('one', { maximumBuckets: Infinity })] }, /Batch one: .*number of buckets/],
  [
    'shares that do not add up',
    { batches: [batch('one', { target: new Map([['base', 5 as PartsPerBillion]]) })] },
    /add up/,
  ],
])('%s is refused with a sentence', (_, given, sentence) => {
  const problem = { batches: [batch('one')], buckets: [bucket('a', 100)], ...given };
  expect(() => planned(problem)).toThrow(FoldInError);
  expect(() => planned(problem)).toThrow(sentence);
});

const anyParts = fc
  .array(fc.integer({ min: 0, max: 30 }), { minLength: 3, maxLength: 4 })
  .filter((parts) => parts.some((part) => part > 0));
const anyQueue = fc
  .record({
    batches: fc.array(fc.tuple(anyParts, fc.integer({ min: 3, max: 30 }), fc.boolean()), {
      minLength: 1,
      maxLength: 4,
    }),
    buckets: fc.array(fc.tuple(anyParts, fc.integer({ min: 20_000, max: 900_000 })), { maxLength: 10 }),
    tau: fc.constantFrom(0, 10_000_000, 50_000_000),
    worth: fc.constantFrom(0, 50),
    count: fc.integer({ min: 0, max: 4 }),
  })
  .map(({ batches, buckets, tau, worth, count }): QueueProblem => ({
    batches: batches.map(([parts, mass, isRanged], n) =>
      batch(`batch${n}`, {
        target: of(parts),
        batch: { minimum: mg(100 * mass), maximum: mg(100 * mass + (isRanged ? 200 : 0)) },
        tolerance: every(tau),
        minimumFresh: mg(2),
        maximumBuckets: count,
        worthOpening: mg(worth),
      }),
    ),
    buckets: buckets.map(([parts, usable], n) => ({
      id: `b${n}`,
      usable: usable as Milligrams,
      composition: of(parts),
    })),
  }));

test('whatever is yielded verifies as a whole and one batch after another, and is within its bound', () => {
  fc.assert(
    fc.property(anyQueue, (problem) => {
      let before: QueuePlans['plans'] | undefined;
      for (const found of [...searchQueue(problem), planned(problem)]) {
        if (found.plans === before) continue;
        before = found.plans;
        expect(verifyQueue(problem, found.plans)).toEqual({ ok: true });
        expect(verdictsOneAfterAnother(problem, found.plans).every((verdict) => verdict.ok)).toBe(true);
        const sum = [...found.plans.values()].reduce((total, plan) => total + plan.reused, 0);
        expect(found.reused).toBe(sum);
        expect(found.bound).toBeGreaterThanOrEqual(found.reused);
        for (const plan of found.plans.values()) expect(plan.objectiveBound).toBeGreaterThanOrEqual(plan.objective);
      }
    }),
    { numRuns: 25 },
  );
});
