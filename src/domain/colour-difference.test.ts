import fc from 'fast-check';
import { expect, test } from 'vitest';
import { ColourError, colourDifference } from './colour-difference.ts';
import { cssColourOf } from './colour.ts';

const anyLab = fc.record({
  l: fc.double({ min: 0, max: 100, noNaN: true }),
  a: fc.double({ min: -100, max: 100, noNaN: true }),
  b: fc.double({ min: -100, max: 100, noNaN: true }),
});

test('a colour does not differ from itself, and differs from another as that one does from it', () => {
  fc.assert(
    fc.property(anyLab, anyLab, (one, other) => {
      expect(colourDifference(one, one)).toBe(0);
      expect(colourDifference(one, other)).toBeCloseTo(colourDifference(other, one), 6);
    }),
  );
});

test('what was not measured has no difference', () => {
  expect(() => colourDifference({ l: Number.NaN, a: 0, b: 0 }, { l: 50, a: 0, b: 0 })).toThrow(ColourError);
});

test('a film is shown by its own L*a*b*', () => {
  expect(cssColourOf({ l: 41.5, a: 58, b: 32.25 })).toBe('lab(41.5 58 32.25)');
});
