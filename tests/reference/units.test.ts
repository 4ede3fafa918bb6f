import { expect, test } from 'vitest';
import {
  CM3_PER_US_FLUID_OUNCE,
  CM3_PER_US_GALLON,
  CM3_PER_US_PINT,
  GRAMS_PER_OUNCE,
  GRAMS_PER_POUND,
} from '#domain/units.ts';

test.each([
  // Derived from NIST's table of units (read): 231 in³ a gallon, 2.54 cm an inch.
  ['a US gallon', CM3_PER_US_GALLON, 3785.411784],
  ['a US pint', CM3_PER_US_PINT, 473.176473],
  ['a US fluid ounce', CM3_PER_US_FLUID_OUNCE, 29.5735295625],
  // NIST (read).
  ['a pound', GRAMS_PER_POUND, 453.59237],
  ['an ounce', GRAMS_PER_OUNCE, 28.349523125],
])('%s', (_, computed, published) => {
  expect(computed).toBeCloseTo(published, 9);
});
