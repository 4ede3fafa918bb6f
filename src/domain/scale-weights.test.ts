import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { type Composition, CompositionError, compositionFromParts } from './composition.ts';
import { MassError, type Milligrams, type PartsPerBillion } from './mass.ts';
import { scaleWeights } from './scale-weights.ts';

const mg = (grams: number) => Math.round(grams * 1000) as Milligrams;
const of = (parts: readonly number[]): Composition =>
  compositionFromParts(parts.map((part, n) => ({ componentId: `c${n}`, parts: String(part) })));
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
        fc.array(fc.integer({ min: 1, max: 60 }), { minLength: 2, maxLength: 5 }),
        fc.integer({ min: 1, max: 30 }),
        (parts, steps) => {
          const target = of(parts);
          const { worstRelativeError } = scaleWeights(target, (steps * 100) as Milligrams, mg(0.1));
          expect(worstRelativeError).toBeCloseTo(bruteForce(target, steps), 9);
        },
      ),
    );
  });

  test('are better than largest remainder where that leaves a small share far off', () => {
    // 1.4, 1.4, 1.4 and 25.8 steps: largest remainder rounds the last one up and one of the small ones, 43 % off.
    const { weights, worstRelativeError } = scaleWeights(of([14, 14, 14, 258]), mg(3), mg(0.1));
    expect([...weights.values()]).toEqual([mg(0.1), mg(0.1), mg(0.1), mg(2.7)]);
    expect(worstRelativeError).toBeCloseTo(0.4 / 1.4, 7);
  });

  test('of 1 mg, of 1,000 kg and of 24 components add up', () => {
    const wide = of(Array.from({ length: 24 }, (_, n) => n * n + 1));
    for (const batch of [1, 999, 1_000_000_000]) {
      const { weights, worstRelativeError } = scaleWeights(wide, batch as Milligrams, 1 as Milligrams);
      expect([...weights.values()].reduce((a, b) => a + b, 0)).toBe(batch);
      expect(Number.isFinite(worstRelativeError)).toBe(true);
    }
    // Each is at most a step from its need; the smallest need is 1/4324 of the batch.
    expect(scaleWeights(wide, 1_000_000_000 as Milligrams, 1 as Milligrams).worstRelativeError).toBeLessThan(4.4e-6);
  });

  test('of a batch between two steps are refused by name', () => {
    expect(() => scaleWeights(of([1, 1]), 150 as Milligrams, mg(0.1))).toThrow(MassError);
    expect(() => scaleWeights(of([1, 1]), 100 as Milligrams, 0 as Milligrams)).toThrow(MassError);
    expect(() => scaleWeights(of([1, 1]), Number.NaN as Milligrams, mg(0.1))).toThrow(MassError);
    expect(() => scaleWeights(of([1, 1]), -100 as Milligrams, mg(0.1))).toThrow(MassError);
    expect(() => scaleWeights(of([1, 1]), 0 as Milligrams, mg(0.1))).toThrow(MassError);
    expect(() => scaleWeights(new Map([['c0', 5 as PartsPerBillion]]), mg(1), mg(0.1))).toThrow(CompositionError);
  });
});
