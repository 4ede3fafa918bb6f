import { expect, test } from 'vitest';
import type { Milligrams } from '#domain/mass.ts';
import { combined, readingUncertainty, rectangular } from '#domain/uncertainty-terms.ts';

test('a reading of d = 0.1 g has 0.02887 g, a net of two 0.0408 g', () => {
  // JCGM 100:2008, 4.3.7 and 5.1.2 (computed).
  const u = readingUncertainty({ readability: 100 as Milligrams, repeatability: 0 as Milligrams }) / 1000;
  expect(u).toBeCloseTo(0.02887, 5);
  expect(combined(u, u)).toBeCloseTo(0.0408, 4);
});

test('0.00017 g (normal), ±0.0002 g and ±0.00005 g (rectangular) make 0.0002075251 g', () => {
  // Estimation of measurement uncertainty in chemical analysis, online course of the University of Tartu (read).
  expect(combined(0.00017, rectangular(0.0002), rectangular(0.00005))).toBeCloseTo(0.0002075251, 10);
});

test('a cadmium standard of 1002.7 mg/L has 0.9 mg/L', () => {
  // EURACHEM/CITAC Guide QUAM, example A1 (read): purity 0.9999 ± 0.0001, mass 100.28 mg with u 0.05 mg, volume 100 mL
  // with u 0.07 mL; 0.9 is printed, 0.864 recomputed.
  const relative = combined(rectangular(0.0001) / 0.9999, 0.05 / 100.28, 0.07 / 100);
  expect(1002.7 * relative).toBeCloseTo(0.864, 3);
  expect(1002.7 * relative).toBeCloseTo(0.9, 1);
});
