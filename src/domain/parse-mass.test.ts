import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { formatGrams } from './format-mass.ts';
import type { Milligrams } from './mass.ts';
import { parseMass } from './parse-mass.ts';

const mg = (value: number) => value as Milligrams;
const grams = (text: string) => parseMass(text, { unit: 'g' });

describe('a typed mass', () => {
  test.each([
    ['850', 850_000],
    ['850.5', 850_500],
    ['850,5', 850_500],
    [' 71.6 ', 71_600],
    ['0.125', 125],
    ['1234', 1_234_000],
    ['1.2340', 1_234],
    ['1234.567', 1_234_567],
  ])('%s g is %d mg', (text, mass) => {
    expect(grams(text)).toEqual({ mass });
  });

  test('kilograms are exact to the milligram', () => {
    expect(parseMass('1,200001', { unit: 'kg' })).toEqual({ mass: 1_200_001 });
  });

  test.each(['1.234', '1,234', '12.345', '123,456'])('%s can mean two things and is asked about', (text) => {
    const digits = text.replace(/[.,]/, '');
    const answer = grams(text);
    expect(answer).toHaveProperty('problem', expect.stringContaining(`Type ${digits} or `));
    expect('problem' in answer && answer.problem.split(' ').length).toBeLessThanOrEqual(12);
  });

  test.each(['0', '0.0', '-5', '−5', 'abc', '1e9', 'NaN', 'Infinity', '1.2.3', '1,2,3', '', ' ', '.5', '5.', '0x10'])(
    '“%s” never gets through',
    (text) => {
      expect(grams(text)).toHaveProperty('problem');
    },
  );

  test('more than the maximum says so, in grams', () => {
    expect(grams('100000.1')).toEqual({ problem: 'Over 100000 g, more than it can carry. Type less.' });
    expect(parseMass('3000.1', { unit: 'g', maximum: mg(3_000_000) })).toHaveProperty('problem');
  });

  test('a mass between two steps of the scale names the step', () => {
    expect(parseMass('71.65', { unit: 'g', readability: mg(100) })).toHaveProperty(
      'problem',
      expect.stringContaining('0.1 g'),
    );
    expect(parseMass('71.6', { unit: 'g', readability: mg(100) })).toEqual({ mass: 71_600 });
  });

  test('what is shown can be typed again, unless it can mean two things', () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 99_999_999 }), fc.constantFrom('en', 'de'), (mass, locale) => {
        const shown = formatGrams(mg(mass), mg(1), locale);
        const answer = grams(shown);
        if ('problem' in answer) expect(answer.problem).toContain('can mean two things');
        else expect(answer.mass).toBe(mass);
      }),
    );
  });
});

describe('a shown mass', () => {
  test.each([
    [71_600, 100, 'en', '71.6'],
    [71_000, 100, 'de', '71,0'],
    [1_234_560, 10, 'en', '1234.56'],
    [850_000, 1000, 'en', '850'],
    [1_000, 500, 'en', '1.0'],
  ])('%d mg on a scale of %d mg in %s is %s', (mass, step, locale, text) => {
    expect(formatGrams(mg(mass), mg(step), locale)).toBe(text);
  });
});
