import { expect, test } from 'vitest';
import type { FoldInPlan } from '#domain/fold-in.ts';
import type { Milligrams } from '#domain/mass.ts';
import { searchUntil } from './search-until.ts';

const mg = (grams: number) => (grams * 1000) as Milligrams;

function planOf(reused: number, status: FoldInPlan['status'], bound = 500): FoldInPlan {
  const [mass, objectiveBound] = [mg(reused), mg(bound)];
  return {
    status,
    batch: mg(600),
    reused: mass,
    objective: mass,
    objectiveBound,
    fromBuckets: reused === 0 ? [] : [{ bucketId: 'sky', mass, empties: true }],
    fresh: new Map([['base', (mg(600) - mass) as Milligrams]]),
    excluded: [],
  };
}

/** A search that finds these one after another, then ends with the last. */
function* finding(...plans: FoldInPlan[]) {
  for (const plan of plans) yield { plan, bound: plan.objectiveBound };
  return plans.at(-1) as FoldInPlan;
}

/** A clock that moves a step each time it is read. */
function clockOf(stepMs: number) {
  let time = 0;
  return { elapsed: () => (time += stepMs), deadlineMs: 1500, pause: async () => {} };
}

const never = () => false;
const ignore = () => {};
const [first, second, last] = [planOf(0, 'none'), planOf(100, 'gap'), planOf(200, 'best', 200)];

test('a search with time enough runs to its end, and tells its progress on the way', async () => {
  const told: FoldInPlan[] = [];
  const plan = await searchUntil(finding(first, second, last), clockOf(0), never, (found) => told.push(found.plan));
  expect(plan).toEqual(last);
  expect(told).toEqual([first, second, last]);
});

test('a search stopped at its deadline gives the best so far, with its bound', async () => {
  expect(await searchUntil(finding(first, second, last), clockOf(800), never, ignore)).toEqual(second);
});

test('a stopped search that has found no tub yet does not claim that none is worth it', async () => {
  const plan = await searchUntil(finding(first, second), clockOf(2000), never, ignore);
  expect(plan).toEqual({ ...first, status: 'gap' });
});

test('a stopped search whose plan is proven keeps its proof', async () => {
  expect(await searchUntil(finding(last, last), clockOf(2000), never, ignore)).toEqual(last);
});

test('a cancelled search ends without a plan and is not continued', async () => {
  let pauses = 0;
  const clock = { elapsed: () => 0, deadlineMs: 1500, pause: async () => void (pauses += 1) };
  expect(await searchUntil(finding(first, second, last), clock, () => pauses === 2, ignore)).toBeUndefined();
  expect(pauses).toBe(2);
});

test('what the search throws reaches the caller', async () => {
  function* failing(): Generator<{ plan: FoldInPlan; bound: Milligrams }, FoldInPlan> {
    yield { plan: first, bound: first.objectiveBound };
    throw new RangeError('The batch is off the step.');
  }
  await expect(searchUntil(failing(), clockOf(0), never, ignore)).rejects.toThrow('The batch is off the step.');
});
