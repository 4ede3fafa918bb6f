import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { type Composition, compositionFromParts } from './composition.ts';
import { MassError, type Milligrams } from './mass.ts';
import { scaleWeightsOn } from './scale-weights-on.ts';

const mg = (grams: number) => Math.round(grams * 1000) as Milligrams;
const of = (parts: readonly number[]): Composition =>
  compositionFromParts(parts.map((part, n) => ({ componentId: `c${n}`, parts: String(part) })));
const stepsFor = (steps: readonly number[]) => (id: string) => (steps[Number(id.slice(1))] ?? 1) as Milligrams;

/** The least worst relative error of all weights that add up to the batch, each on its own step. */
function bruteForce(target: Composition, batch: number, steps: readonly number[]): number {
  const needs = [...target.values()].map((share) => (share / 1e9) * batch);
  let best = Infinity;
  const walk = (n: number, left: number, worst: number) => {
    if (worst >= best) return;
    if (n === needs.length) {
      if (left === 0) best = worst;
      return;
    }
    const [need, step] = [needs[n] as number, steps[n] as number];
    for (let weight = 0; weight <= left; weight += step) {
      walk(n + 1, left - weight, Math.max(worst, Math.abs(weight - need) / need));
    }
  };
  walk(0, batch, 0);
  return best;
}

describe('weights on several scales', () => {
  test('a pigment goes on the fine scale, the base on the coarse one, and they add up', () => {
    const { weights } = scaleWeightsOn(of([975, 25]), mg(500), stepsFor([mg(1), mg(0.01)]));
    // 12.5 g of pigment would leave the base between two of its steps.
    expect([...weights.values()].reduce((a, b) => a + b, 0)).toBe(mg(500));
    expect((weights.get('c0') ?? 0) % mg(1)).toBe(0);
    expect(weights.get('c1')).toBe(mg(12));
  });

  test('have the least worst relative error that any have whose steps divide one another', () => {
    fc.assert(
      fc.property(
        fc.array(fc.tuple(fc.integer({ min: 1, max: 60 }), fc.constantFrom(1, 2, 4)), { minLength: 2, maxLength: 4 }),
        fc.integer({ min: 1, max: 40 }),
        (parts, size) => {
          const steps = parts.map(([, step]) => step);
          const target = of(parts.map(([part]) => part));
          const batch = size * Math.min(...steps);
          const best = bruteForce(target, batch, steps);
          fc.pre(Number.isFinite(best));
          const { weights, worstRelativeError } = scaleWeightsOn(target, batch as Milligrams, stepsFor(steps));
          expect(worstRelativeError).toBeCloseTo(best, 9);
          expect([...weights.values()].reduce((a, b) => a + b, 0)).toBe(batch);
          [...weights.values()].forEach((weight, n) => expect(weight % (steps[n] as number)).toBe(0));
        },
      ),
      { numRuns: 500 },
    );
  });

  test('are on their steps too where these do not divide one another', () => {
    const { weights } = scaleWeightsOn(of([70, 30]), mg(100), stepsFor([mg(0.5), mg(0.2)]));
    expect([...weights.values()].reduce((a, b) => a + b, 0)).toBe(mg(100));
    expect((weights.get('c0') ?? 1) % mg(0.5)).toBe(0);
    expect((weights.get('c1') ?? 1) % mg(0.2)).toBe(0);
  });

  test('that cannot add up are refused by name', () => {
    // 0.1 g more than whole grams, and nothing on the fine scale.
    expect(() => scaleWeightsOn(of([1, 1]), mg(10.1), () => mg(1))).toThrow(MassError);
    expect(() => scaleWeightsOn(of([1, 1]), mg(10), () => 0 as Milligrams)).toThrow(MassError);
    expect(() => scaleWeightsOn(of([1, 1]), Number.NaN as Milligrams, () => mg(1))).toThrow(MassError);
  });
});
