import type { FoldInProblem } from '#domain/fold-in.ts';
import type { QueueProblem } from '#domain/plan-queue.ts';
import type { Milligrams } from '#domain/mass.ts';
import { seededRandom } from '#scripts/seed/random.ts';
import { bucket, formula, recipe, sharesPigments, toleranceOf, variant } from './fold-in-shop.ts';

export interface QueueAsk {
  buckets: number;
  batches: number;
  tolerance: boolean;
  maximumBuckets: number;
  worthOpening: Milligrams;
  minimumFresh: Milligrams;
}

const grams = (mass: number) => Math.round(mass * 1000) as Milligrams;

/** One shop's shelf and a week of batches of its formulas: 24 components, leftovers of these batches and of others. */
export function makeQueueShop(seed: number, ask: QueueAsk): QueueProblem {
  const random = seededRandom(seed);
  const formulas = Array.from({ length: 40 }, () => formula(random));
  const variants = formulas.flatMap((of) => Array.from({ length: 4 }, () => variant(random, of)));
  const targets = Array.from({ length: ask.batches }, () => random.pick(variants));
  const near = variants.filter((other) => targets.some((target) => sharesPigments(other, target)));
  const buckets: FoldInProblem['buckets'] = Array.from({ length: ask.buckets }, (_, n) =>
    bucket(random, `b${n}`, near, variants),
  );
  const batches = targets.map((target, n) => {
    const mass = grams(random.pick([500, 800, 1000, 1500, 2500, 5000]));
    return {
      id: `batch${n}`,
      target: recipe(target),
      batch: { minimum: mass, maximum: mass },
      tolerance: ask.tolerance ? toleranceOf(recipe(target)) : new Map(),
      readability: grams(0.1),
      minimumFromBucket: grams(20),
      minimumFresh: ask.minimumFresh,
      sliver: grams(30),
      maximumBuckets: ask.maximumBuckets,
      worthOpening: ask.worthOpening,
    };
  });
  return { batches, buckets };
}
