import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { type Composition, CompositionError, compositionFromParts } from './composition.ts';
import { MassError, type Milligrams, type PartsPerBillion } from './mass.ts';
import { type ScaleLimits, leastMassWithin } from './scale-limits.ts';
import { scaleWeights } from './scale-weights.ts';
import { smallestWeighableBatch } from './smallest-weighable-batch.ts';

const mg = (grams: number) => Math.round(grams * 1000) as Milligrams;
const of = (parts: readonly number[]): Composition =>
  compositionFromParts(parts.map((part, n) => ({ componentId: `c${n}`, parts: String(part) })));
const bench: ScaleLimits = {
  readability: mg(0.1),
  repeatability: mg(0),
  minimum: mg(2),
  maximum: mg(3000),
  errorLimit: 0.03,
};

function isWeighable(target: Composition, batch: number, scale: ScaleLimits): boolean {
  const { weights, worstRelativeError } = scaleWeights(target, batch as Milligrams, scale.readability);
  const least = Math.max(scale.minimum, leastMassWithin(scale));
  return worstRelativeError <= scale.errorLimit && [...weights.values()].every((weight) => weight >= least);
}

/** Step by step, as it is defined. */
function byScan(target: Composition, scale: ScaleLimits): number {
  const d = scale.readability;
  const least = Math.max(scale.minimum, leastMassWithin(scale));
  let batch = Math.ceil((least * 1e9) / Math.min(...target.values()) / d) * d;
  while (!isWeighable(target, batch, scale)) batch += d;
  return batch;
}

describe('the smallest weighable batch', () => {
  test('makes the smallest share as heavy as the scale can weigh within its limit', () => {
    // m_ℓ = 2√2·√(0.1²/12)/0.03 = 2.72 g, above the minimum of 2 g: 2.8 g, the nearest step from 2.75 g = 55 g/20 on.
    expect(smallestWeighableBatch(of([95, 5]), bench)).toBe(mg(55));
  });

  test('is what trying one step after another finds', () => {
    fc.assert(
      fc.property(
        fc.array(fc.integer({ min: 1, max: 100 }), { minLength: 1, maxLength: 8 }),
        fc.integer({ min: 0, max: 3000 }),
        fc.constantFrom(0, 30, 100),
        fc.constantFrom(0.01, 0.03, 0.2, 0.7),
        (parts, minimum, repeatability, errorLimit) => {
          const scale = { ...bench, minimum, repeatability, errorLimit } as ScaleLimits;
          expect(smallestWeighableBatch(of(parts), scale)).toBe(byScan(of(parts), scale));
        },
      ),
      { numRuns: 300 },
    );
  });

  test('is found at once where the smallest share is a billionth and half a step is half a billion steps', () => {
    const tiny = new Map([
      ['base', 999_999_999 as PartsPerBillion],
      ['trace', 1 as PartsPerBillion],
    ]);
    const scale = { ...bench, minimum: mg(3.01) };
    const batch = smallestWeighableBatch(tiny, scale);
    // 3.01 g is shown as 3.0 g until the need is 3.05 g.
    expect(batch).toBe(mg(3.05e9));
    expect(isWeighable(tiny, batch, scale)).toBe(true);
    expect(isWeighable(tiny, batch - mg(0.1), scale)).toBe(false);
  });

  test('has 24 components within the limit, alike or not', () => {
    for (const parts of [
      Array.from({ length: 24 }, () => 1),
      Array.from({ length: 24 }, (_, n) => 1 + n ** 3),
      Array.from({ length: 24 }, (_, n) => (n === 0 ? 9000 : 40 + n)),
    ]) {
      for (const scale of [bench, { ...bench, minimum: mg(20.05) }, { ...bench, errorLimit: 0.0001 }]) {
        expect(isWeighable(of(parts), smallestWeighableBatch(of(parts), scale), scale)).toBe(true);
      }
    }
  });

  test('grows with repeatability', () => {
    const shaky = { ...bench, repeatability: mg(0.1) };
    expect(smallestWeighableBatch(of([95, 5]), shaky)).toBeGreaterThan(smallestWeighableBatch(of([95, 5]), bench));
  });

  test('bad input is refused by name', () => {
    const batch = (wrong: Partial<Record<keyof ScaleLimits, number>>) => () =>
      smallestWeighableBatch(of([95, 5]), { ...bench, ...wrong } as ScaleLimits);
    for (const errorLimit of [0, 1, -0.03, Number.NaN, Infinity]) expect(batch({ errorLimit })).toThrow(MassError);
    expect(batch({ readability: 0 })).toThrow(MassError);
    expect(batch({ minimum: -1 })).toThrow(MassError);
    expect(batch({ minimum: Number.NaN })).toThrow(MassError);
    expect(() => smallestWeighableBatch(new Map(), bench)).toThrow(CompositionError);
    const trace = new Map([
      ['base', 999_999_999 as PartsPerBillion],
      ['trace', 1 as PartsPerBillion],
    ]);
    expect(() => smallestWeighableBatch(trace, { ...bench, minimum: mg(100_000) })).toThrow(MassError);
  });
});
