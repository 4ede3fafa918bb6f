import { describe, expect, test } from 'vitest';
import { compositionFromParts } from './composition.ts';
import type { FoldInProblem } from './fold-in.ts';
import { type Certificate, boundOf } from './fold-in-bound.ts';
import { prepareSearch } from './fold-in-candidates.ts';
import { certify } from './fold-in-certificate.ts';
import { relax } from './fold-in-relaxation.ts';
import type { Decisions } from './fold-in-rows.ts';
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
const search = prepareSearch(problem);
const open: Decisions = { buckets: search.candidates.map(() => 'free'), fresh: search.components.map(() => 'free') };

describe('the bound of a certificate', () => {
  test('is the optimum where the relaxation is tight: half of the batch from the deep tub', () => {
    const relaxed = relax(search, open, []);
    expect(certify(search, relaxed.certificate)).toBe(mg(500));
    expect(relaxed.bound.value).toBeCloseTo(mg(500), 3);
  });

  test('holds with any multipliers, only worse', () => {
    const { certificate } = relax(search, open, []);
    for (const factor of [0, 0.3, 2, 17]) {
      const other: Certificate = { ...certificate, multipliers: certificate.multipliers.map((pi) => pi * factor) };
      expect(certify(search, other)).toBeGreaterThanOrEqual(mg(500));
      expect(Math.abs(certify(search, other) - boundOf(search, other).value)).toBeLessThanOrEqual(1);
    }
  });

  test('without multipliers is all that the best tub can give', () => {
    const { certificate } = relax(search, open, []);
    const none: Certificate = { ...certificate, multipliers: certificate.multipliers.map(() => 0) };
    // What the cap lets in of the deep tub is the first bound there is: 500 g.
    expect(certify(search, none)).toBe(mg(500));
    expect(certify(prepareSearch({ ...problem, maximumBuckets: 2 }), none)).toBe(mg(800));
  });

  test('a closed tub adds nothing', () => {
    const closed: Decisions = { ...open, buckets: ['closed', 'free'] };
    expect(certify(search, relax(search, closed, []).certificate)).toBe(mg(300));
  });
});
