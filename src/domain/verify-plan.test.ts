import { describe, expect, test } from 'vitest';
import { compositionFromParts } from './composition.ts';
import { type FoldInPlan, type FoldInProblem, foldInBuckets } from './fold-in.ts';
import type { Milligrams, PartsPerBillion } from './mass.ts';
import { verifyPlan } from './verify-plan.ts';

const mg = (grams: number) => Math.round(grams * 1000) as Milligrams;
const of = (parts: Record<string, string>) =>
  compositionFromParts(Object.entries(parts).map(([componentId, text]) => ({ componentId, parts: text })));

const problem: FoldInProblem = {
  target: of({ base: '70', white: '20', blue: '10' }),
  batch: { minimum: mg(600), maximum: mg(600) },
  buckets: [
    { id: 'sky', usable: mg(186.4), composition: of({ base: '78', white: '20', blue: '2' }) },
    { id: 'deep', usable: mg(900), composition: of({ base: '60', white: '20', blue: '20' }) },
  ],
  tolerance: new Map([['red', 1_000_000 as PartsPerBillion]]),
  readability: mg(0.1),
  minimumFromBucket: mg(20),
  minimumFresh: mg(2),
  sliver: mg(30),
  maximumBuckets: 1,
  worthOpening: mg(100),
};
const good = foldInBuckets(problem);

function judge(change: Partial<FoldInPlan>, of: Partial<FoldInProblem> = {}) {
  return verifyPlan({ ...problem, ...of }, { ...good, ...change });
}

/** The plan with some of one fresh component moved to another. */
function moved(from: string, to: string, mass: Milligrams): Partial<FoldInPlan> {
  const fresh = new Map(good.fresh);
  fresh.set(from, ((fresh.get(from) ?? 0) - mass) as Milligrams);
  fresh.set(to, ((fresh.get(to) ?? 0) + mass) as Milligrams);
  return { fresh };
}

describe('a plan is checked in exact arithmetic', () => {
  test('the plan of the search holds', () => {
    expect(judge({})).toEqual({ ok: true });
    expect(good.fromBuckets).toHaveLength(1);
  });

  test('a step too much of one component and too little of another holds, two steps do not', () => {
    const exact = { ...problem, buckets: [] };
    const plan = foldInBuckets(exact);
    const shift = (mass: Milligrams) => {
      const fresh = new Map(plan.fresh);
      fresh.set('base', ((fresh.get('base') ?? 0) - mass) as Milligrams);
      fresh.set('blue', ((fresh.get('blue') ?? 0) + mass) as Milligrams);
      return verifyPlan(exact, { ...plan, fresh }).ok;
    };
    expect([shift(mg(0)), shift(mg(0.1)), shift(mg(0.2))]).toEqual([true, true, false]);
  });

  const [from] = good.fromBuckets;
  if (from === undefined) throw new Error('The plan must use a bucket.');
  test.each<[string, Partial<FoldInPlan>, Partial<FoldInProblem>, RegExp]>([
    ['a sum that is not the batch', { batch: mg(601) }, {}, /add up/],
    ['re-use that is not what the buckets give', { reused: mg(1) }, {}, /buckets give/],
    ['a component too much', moved('base', 'blue', mg(5)), {}, /tolerance/],
    ['a component that the formula does not have', moved('base', 'red', mg(5)), {}, /red/],
    ['a mass between two steps', moved('base', 'blue', 50 as Milligrams), {}, /off the step/],
    ['too many buckets', {}, { maximumBuckets: 0 }, /at most 0/],
    ['an unknown bucket', { fromBuckets: [{ ...from, bucketId: 'ghost' }] }, {}, /ghost/],
    ['a bucket used twice', { fromBuckets: [from, from] }, {}, /twice/],
    [
      'an emptied bucket that is not',
      { fromBuckets: [{ ...from, empties: !from.empties }] },
      {},
      /sliver|off the step/,
    ],
    ['a tub that must be used and is not', {}, { buckets: mustUse(from.bucketId) }, /must be used/],
    ['another batch', {}, { batch: { minimum: mg(700), maximum: mg(700) } }, /outside its limits/],
    ['too little of a bucket', {}, { minimumFromBucket: mg(500) }, /too little|must/],
  ])('%s does not', (_, change, of, reason) => {
    const verdict = judge(change, of);
    expect(verdict.ok).toBe(false);
    expect('reasons' in verdict && verdict.reasons.join(' ')).toMatch(reason);
  });
});

function mustUse(except: string): FoldInProblem['buckets'] {
  return problem.buckets.map((bucket) => ({ ...bucket, mustUse: bucket.id !== except }));
}
