import { describe, expect, test } from 'vitest';
import { type Composition, compositionFromMasses } from '#domain/composition.ts';
import { type FoldInPlan, type FoldInProblem, foldInBuckets, verifyPlan } from '#domain/fold-in.ts';
import type { Milligrams, PartsPerBillion } from '#domain/mass.ts';
import { searchUntil } from './search-until.ts';

const mg = (grams: number) => Math.round(grams * 1000) as Milligrams;
const of = (parts: Record<string, number>): Composition =>
  compositionFromMasses(
    Object.entries(parts).map(([componentId, mass]) => ({ componentId, mass: mass as Milligrams })),
  );

/** Many tubs that nearly fit, so that the search has to branch for long. */
function hardProblem(): FoldInProblem {
  const buckets = Array.from({ length: 40 }, (_, n) => ({
    id: `tub-${n}`,
    usable: mg(180 + ((n * 37) % 110)),
    composition: of({
      base: 60 + ((n * 7) % 20),
      white: 12 + ((n * 11) % 17),
      blue: 5 + ((n * 5) % 13),
      red: 1 + (n % 6),
    }),
  }));
  const tolerance = new Map(['base', 'white', 'blue', 'red'].map((id) => [id, 8_000_000 as PartsPerBillion]));
  return {
    target: of({ base: 68, white: 20, blue: 9, red: 3 }),
    batch: { minimum: mg(1500), maximum: mg(1500) },
    buckets,
    tolerance,
    readability: mg(0.1),
    minimumFromBucket: mg(20),
    minimumFresh: mg(0),
    sliver: mg(20),
    maximumBuckets: 6,
    worthOpening: mg(30),
  };
}

/** A clock that moves a step each time it is read. */
function clockOf(stepMs: number, deadlineMs: number) {
  let time = 0;
  return { elapsed: () => (time += stepMs), deadlineMs, pause: async () => {} };
}

const never = () => false;
const ignore = () => {};

describe('a search with a deadline', () => {
  test('gives the whole search’s plan when it has the time', async () => {
    const problem = { ...hardProblem(), buckets: hardProblem().buckets.slice(0, 4) };
    expect(await searchUntil(problem, clockOf(0, 1500), never, ignore)).toEqual(foldInBuckets(problem));
  });

  test('stopped at its deadline gives the best so far, verified, with a bound and no claim beyond it', async () => {
    const problem = hardProblem();
    const plan = (await searchUntil(problem, clockOf(1000, 1500), never, ignore)) as FoldInPlan;
    expect(verifyPlan(problem, plan)).toEqual({ ok: true });
    expect(plan.status).toBe('gap');
    expect(plan.objectiveBound).toBeGreaterThan(plan.objective);
  });

  test('tells its progress until it stops', async () => {
    const bounds: number[] = [];
    await searchUntil(hardProblem(), clockOf(1000, 4500), never, ({ bound }) => bounds.push(bound));
    expect(bounds.length).toBeGreaterThan(0);
    expect([...bounds].sort((a, b) => b - a)).toEqual(bounds);
  });

  test('ends without a plan when it is cancelled', async () => {
    let pauses = 0;
    const clock = { elapsed: () => 0, deadlineMs: 1500, pause: async () => void (pauses += 1) };
    expect(await searchUntil(hardProblem(), clock, () => pauses === 2, ignore)).toBeUndefined();
    expect(pauses).toBe(2);
  });
});
