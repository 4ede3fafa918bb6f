import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { type Composition, compositionFromParts } from './composition.ts';
import { MassError, type Milligrams } from './mass.ts';
import { type ScaleLimits, leastMassWithin, scaleWeights, smallestWeighableBatch } from './scale-weights.ts';

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

/** All ways to share `steps` out, by brute force: the least worst relative error there is. */
function bruteForce(target: Composition, steps: number): number {
  const shares = [...target.values()].map((share) => share / 1e9);
  let best = Infinity;
  const walk = (n: number, left: number, worst: number) => {
    if (worst >= best) return;
    const need = (shares[n] as number) * steps;
    const error = (weight: number) => Math.max(worst, Math.abs(weight - need) / need);
    if (n === shares.length - 1) {
      best = Math.min(best, error(left));
      return;
    }
    for (let weight = 0; weight <= left; weight++) walk(n + 1, left - weight, error(weight));
  };
  walk(0, steps, 0);
  return best;
}

describe('weights on the scale', () => {
  test('add up to the batch in whole steps', () => {
    fc.assert(
      fc.property(
        fc.array(fc.integer({ min: 1, max: 1000 }), { minLength: 1, maxLength: 9 }),
        fc.integer({ min: 1, max: 50_000 }),
        (parts, steps) => {
          const batch = (steps * 100) as Milligrams;
          const { weights, worstRelativeError } = scaleWeights(of(parts), batch, mg(0.1));
          expect([...weights.values()].reduce((a, b) => a + b, 0)).toBe(batch);
          expect([...weights.values()].every((weight) => weight % 100 === 0 && weight >= 0)).toBe(true);
          expect(worstRelativeError).toBeGreaterThanOrEqual(0);
        },
      ),
    );
  });

  test('have the least worst relative error that any sharing out has', () => {
    fc.assert(
      fc.property(
        fc.array(fc.integer({ min: 1, max: 60 }), { minLength: 2, maxLength: 4 }),
        fc.integer({ min: 1, max: 24 }),
        (parts, steps) => {
          const target = of(parts);
          const { worstRelativeError } = scaleWeights(target, (steps * 100) as Milligrams, mg(0.1));
          expect(worstRelativeError).toBeCloseTo(bruteForce(target, steps), 9);
        },
      ),
    );
  });

  test('of a batch between two steps are refused by name', () => {
    expect(() => scaleWeights(of([1, 1]), 150 as Milligrams, mg(0.1))).toThrow(MassError);
    expect(() => scaleWeights(of([1, 1]), 100 as Milligrams, 0 as Milligrams)).toThrow(MassError);
    expect(() => scaleWeights(of([1, 1]), Number.NaN as Milligrams, mg(0.1))).toThrow(MassError);
  });
});

describe('the smallest weighable batch', () => {
  test('makes the smallest share as heavy as the scale can weigh within its limit', () => {
    // m_ℓ = 2√2·√(0.1²/12)/0.03 = 2.72 g, above the minimum of 2 g; a twentieth of the batch.
    const batch = smallestWeighableBatch(of([95, 5]), bench);
    expect(batch).toBeGreaterThanOrEqual(mg(54.4));
    expect(batch).toBeLessThan(mg(57));
    const { weights, worstRelativeError } = scaleWeights(of([95, 5]), batch, bench.readability);
    expect(Math.min(...weights.values())).toBeGreaterThanOrEqual(bench.minimum);
    expect(worstRelativeError).toBeLessThanOrEqual(bench.errorLimit);
  });

  test('grows with repeatability', () => {
    const shaky = { ...bench, repeatability: mg(0.1) };
    expect(smallestWeighableBatch(of([95, 5]), shaky)).toBeGreaterThan(smallestWeighableBatch(of([95, 5]), bench));
    expect(leastMassWithin(shaky)).toBeGreaterThan(leastMassWithin(bench));
  });

  test('has no answer without an error limit', () => {
    expect(() => smallestWeighableBatch(of([1]), { ...bench, errorLimit: 0 })).toThrow(MassError);
  });
});
