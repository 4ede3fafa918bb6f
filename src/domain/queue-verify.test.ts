import { expect, test } from 'vitest';
import { compositionFromMasses } from './composition.ts';
import type { FoldInPlan } from './fold-in.ts';
import type { Milligrams } from './mass.ts';
import { type QueueProblem, verifyQueue } from './plan-queue.ts';

const mg = (grams: number) => Math.round(grams * 1000) as Milligrams;
const pure = compositionFromMasses([{ componentId: 'base', mass: mg(1) }]);
const other = compositionFromMasses([{ componentId: 'red', mass: mg(1) }]);
const queue: QueueProblem = {
  batches: ['monday', 'tuesday'].map((id) => ({
    id,
    target: pure,
    batch: { minimum: mg(500), maximum: mg(500) },
    tolerance: new Map(),
    readability: mg(0.1),
    minimumFromBucket: mg(20),
    minimumFresh: mg(5),
    sliver: mg(30),
    maximumBuckets: 1,
    worthOpening: mg(0),
  })),
  buckets: [
    { id: 'left', usable: mg(700.05), composition: pure },
    { id: 'red', usable: mg(100), composition: other },
  ],
};

function plan(grams: number, empties = false, given: Partial<FoldInPlan> = {}): FoldInPlan {
  const mass = mg(grams);
  return {
    status: 'gap',
    batch: mass % 100 === 0 ? mg(500) : ((mg(500) + (mass % 100)) as Milligrams),
    reused: mass,
    objective: mass,
    objectiveBound: mg(500),
    fromBuckets: [{ bucketId: 'left', mass, empties }],
    fresh: new Map([['base', (mg(500) - Math.floor(mass / 100) * 100) as Milligrams]]),
    excluded: [],
    ...given,
  };
}

const verdictOf = (monday: FoldInPlan, tuesday: FoldInPlan, problem = queue) =>
  verifyQueue(problem, new Map(Object.entries({ monday, tuesday })));

test('a bucket may be shared: a part on the step, then the odd rest', () => {
  expect(verdictOf(plan(400), plan(300.05, true))).toEqual({ ok: true });
  expect(verdictOf(plan(400), plan(270))).toEqual({ ok: true });
});

test.each<[string, FoldInPlan, FoldInPlan, RegExp]>([
  ['more than there is', plan(400), plan(400), /left/],
  ['a sliver left for the next', plan(480), plan(200), /sliver/],
  ['emptied when something stays', plan(400), plan(200, true), /not emptied/],
  ['the rest, not said to be emptied', plan(400), plan(300.05), /emptied/],
  ['a part off the step', plan(400.05), plan(200), /off the step/],
  ['too little to take out', plan(10), plan(200), /too little/],
  ['fresh ink too little to weigh', plan(498), plan(100), /too little to weigh/],
  ['a sum that is not the batch', plan(400, false, { fresh: new Map() }), plan(100), /add up/],
  ['another sum of buckets', plan(400, false, { reused: mg(300) }), plan(100), /buckets give/],
  [
    'what is foreign to the formula',
    plan(100, true, { fromBuckets: [{ bucketId: 'red', mass: mg(100), empties: true }] }),
    plan(100),
    /red is outside its tolerance/,
  ],
  [
    'an unknown bucket',
    plan(100, false, { fromBuckets: [{ bucketId: 'x', mass: mg(100), empties: false }] }),
    plan(100),
    /x/,
  ],
  [
    'a mass that is no number',
    plan(100, false, { fresh: new Map([['base', Number.NaN as Milligrams]]) }),
    plan(100),
    /whole/,
  ],
])('%s does not verify', (_, monday, tuesday, reason) => {
  const verdict = verdictOf(monday, tuesday);
  expect(verdict.ok).toBe(false);
  expect(verdict.ok ? '' : verdict.reasons.join(' ')).toMatch(reason);
});

test('a batch without a plan, a plan without a batch, a bucket that may not be used or must be used up do not verify', () => {
  expect(verifyQueue(queue, new Map([['monday', plan(400)]]))).toMatchObject({ ok: false });
  const plans = new Map(Object.entries({ monday: plan(400), tuesday: plan(200), sunday: plan(100) }));
  expect(verifyQueue(queue, plans)).toMatchObject({ ok: false });
  const batches = queue.batches.map((batch) => ({ ...batch, allowed: new Set(['red']) }));
  expect(verdictOf(plan(400), plan(200), { ...queue, batches })).toMatchObject({ ok: false });
  const buckets = queue.buckets.map((bucket) => ({ ...bucket, mustUse: bucket.id === 'left' }));
  expect(verdictOf(plan(400), plan(200), { ...queue, buckets })).toMatchObject({ ok: false });
  expect(verdictOf(plan(400), plan(300.05, true), { ...queue, buckets })).toEqual({ ok: true });
});
