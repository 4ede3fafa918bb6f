import { describe, expect, test } from 'vitest';
import { MassError, type Milligrams } from './mass.ts';
import type { ScaleLimits } from './scale-limits.ts';
import { flagWeights } from './weighing-flags.ts';

const mg = (grams: number) => Math.round(grams * 1000) as Milligrams;
const bench: ScaleLimits = {
  readability: mg(0.1),
  repeatability: mg(0),
  minimum: mg(2),
  maximum: mg(3000),
  errorLimit: 0.03,
};
const flags = (grams: number, scale = bench) => flagWeights(new Map([['blue', mg(grams)]]), () => scale).get('blue');

describe('what is wrong with a weight', () => {
  test('nothing, from the least mass that meets the limit up to the maximum', () => {
    // 2√2·(0.1/√12)/0.03 = 2.72 g
    expect(flags(2.8)).toBeUndefined();
    expect(flags(3000)).toBeUndefined();
  });

  test('its uncertainty is too large a part of it', () => {
    expect(flags(2.7)).toEqual(['imprecise']);
  });

  test('the scale does not begin so low', () => {
    expect(flags(1.9)).toEqual(['imprecise', 'under-minimum']);
    expect(flags(4.9, { ...bench, minimum: mg(5) })).toEqual(['under-minimum']);
  });

  test('the scale does not reach so far', () => {
    expect(flags(3000.1)).toEqual(['over-maximum']);
  });

  test('each component is judged on the scale that weighs it', () => {
    const fine = { ...bench, readability: mg(0.01), minimum: mg(0.2), maximum: mg(200) };
    const weights = new Map([
      ['base', mg(400)],
      ['blue', mg(0.3)],
    ]);
    expect(flagWeights(weights, (id) => (id === 'blue' ? fine : bench)).size).toBe(0);
    expect([...flagWeights(weights, () => fine).keys()]).toEqual(['base']);
  });

  test('cannot be said of no weight, or on a scale that weighs nothing', () => {
    expect(() => flags(Number.NaN)).toThrow(MassError);
    expect(() => flags(1, { ...bench, maximum: mg(1) })).toThrow(MassError);
    expect(() => flags(1, { ...bench, errorLimit: 0 })).toThrow(MassError);
  });
});
