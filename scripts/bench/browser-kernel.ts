import { foldInBuckets } from '#domain/fold-in.ts';
import { asksOf, SIZES, warmUp } from './fold-in-rows.ts';
import { makeShop } from './fold-in-shop.ts';

/** ms of each seed of each row: what a page runs, alone on its thread as in a worker. */
function measure(seeds: number): number[][] {
  warmUp((problem) => foldInBuckets(problem));
  return SIZES.flatMap(asksOf).map((ask) =>
    Array.from({ length: seeds }, (_, n) => {
      const problem = makeShop(n + 1, ask);
      const started = performance.now();
      foldInBuckets(problem);
      return performance.now() - started;
    }),
  );
}

Object.assign(globalThis, { measure });
