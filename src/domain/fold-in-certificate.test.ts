import { describe, expect, test } from 'vitest';
import { compositionFromParts } from './composition.ts';
import type { FoldInProblem } from './fold-in.ts';
import { type Certificate, boundOf } from './fold-in-bound.ts';
import { prepareSearch } from './fold-in-candidates.ts';
import { certify } from './fold-in-certificate.ts';
import type { Decision } from './fold-in-decisions.ts';
import { relaxationOf } from './fold-in-program.ts';
import { Subset } from './fold-in-subset.ts';
import type { Milligrams } from './mass.ts';

const mg = (grams: number) => Math.round(grams * 1000) as Milligrams;
const of = (base: string, blue: string) =>
  compositionFromParts([
    { componentId: 'base', parts: base },
    { componentId: 'blue', parts: blue },
  ]);

// 10 % blue; a tub of 20 % blue goes in up to half of the batch, one of 5 % up to 94.7 % (its base is 95 %).
const problem: FoldInProblem = {
  target: of('90', '10'),
  batch: { minimum: mg(1000), maximum: mg(1000) },
  buckets: [
    { id: 'deep', usable: mg(800), composition: of('80', '20') },
    { id: 'sky', usable: mg(300), composition: of('95', '5') },
  ],
  tolerance: new Map(),
  readability: mg(0.1),
  minimumFromBucket: mg(20),
  minimumFresh: mg(0),
  sliver: mg(30),
  maximumBuckets: 1,
  worthOpening: mg(0),
};
/** The bound at the relaxation's optimum, in floating point and exactly, and that of any other multipliers. */
function relax(given: FoldInProblem, buckets: readonly Decision[] = ['free', 'free']) {
  const search = prepareSearch(given);
  const relaxation = relaxationOf(search);
  const subset = new Subset({ search, relaxation });
  subset.decide({ ...subset.decisions, buckets });
  subset.solve();
  const { certificate } = subset;
  const exact = (other: Certificate) => certify(search, relaxation, other);
  const floating = (other: Certificate) => boundOf(search, relaxation, other).value;
  const times = (factor: number) => ({ ...certificate, multipliers: certificate.multipliers.map((pi) => pi * factor) });
  return { certificate, exact, floating, times };
}

describe('the bound of a certificate', () => {
  test('is the optimum where the relaxation is tight: half of the batch from the deep tub', () => {
    const { certificate, exact, floating } = relax(problem);
    expect(exact(certificate)).toBe(mg(500));
    expect(floating(certificate)).toBeCloseTo(mg(500), 3);
  });

  test('holds with any multipliers, only worse', () => {
    const { exact, floating, times } = relax({ ...problem, maximumBuckets: 2 });
    const best = exact(times(1));
    for (const factor of [-3, 0, 0.3, 2, 17]) {
      expect(exact(times(factor))).toBeGreaterThanOrEqual(best);
      expect(Math.abs(exact(times(factor)) - floating(times(factor)))).toBeLessThanOrEqual(1);
    }
  });

  test('without multipliers is all that the best tub can give', () => {
    // What the cap lets in of the deep tub is the first bound there is: 500 g.
    const one = relax(problem);
    expect(one.exact(one.times(0))).toBe(mg(500));
    const two = relax({ ...problem, maximumBuckets: 2 });
    expect(two.exact(two.times(0))).toBe(mg(800));
  });

  test('a closed tub adds nothing', () => {
    const { certificate, exact } = relax(problem, ['closed', 'free']);
    expect(exact(certificate)).toBe(mg(300));
  });
});
