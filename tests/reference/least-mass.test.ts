import { describe, expect, test } from 'vitest';
import type { Milligrams } from '#domain/mass.ts';
import { leastMassWithin } from '#domain/scale-weights.ts';

const scale = (readability: number, repeatability: number, errorLimit: number) => ({
  readability: readability as Milligrams,
  repeatability: repeatability as Milligrams,
  errorLimit,
});

describe('the least mass that a scale weighs within a limit', () => {
  test('d = 0.1 g and 1 %: 8.2 g', () => {
    // USP <41>, repeatability floor 0.41 d: minimum weight 0.82 d / t (excerpt in a balance maker's guide, read).
    expect(leastMassWithin(scale(100, 0, 0.01)) / 1000).toBeCloseTo(8.2, 1);
  });

  test('the reading of a scale of d = 0.1 g has a standard uncertainty of 0.02887 g', () => {
    // JCGM 100:2008 (GUM) 4.3.7, rectangular distribution of full width d: u = d/√12 (computed). m_ℓ·ℓ = 2√2·u.
    expect(leastMassWithin(scale(100, 0, 1)) / (2 * Math.SQRT2)).toBeCloseTo(28.87, 2);
  });

  test('a net weight, the difference of two such readings, has 0.0408 g', () => {
    // JCGM 100:2008 5.1.2, two independent readings: √2·d/√12 (computed). m_ℓ·ℓ = 2·u(net).
    expect(leastMassWithin(scale(100, 0, 1)) / 2).toBeCloseTo(40.8, 1);
  });

  test('with repeatability alone it is two standard deviations of a net weight over the limit', () => {
    // USP <41>: 2·s/m ≤ 0.10 % (excerpt, read); a net weight has √2·s. 100 mg, with a step too fine to matter.
    const least = leastMassWithin(scale(1, 100, 0.001));
    expect(least / (Math.SQRT2 * ((2 * 100) / 0.001))).toBeCloseTo(1, 4);
  });
});
