import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { type Composition, CompositionError, compositionFromParts } from './composition.ts';
import { MassError, type Milligrams, WHOLE } from './mass.ts';
import { LetDownError, type LetDownInput, proposeLetDown } from './propose-let-down.ts';
import { type ScaleLimits, leastMassWithin } from './scale-limits.ts';

const mg = (grams: number) => Math.round(grams * 1000) as Milligrams;
const of = (parts: Record<string, number>): Composition =>
  compositionFromParts(Object.entries(parts).map(([componentId, part]) => ({ componentId, parts: String(part) })));
const bench: ScaleLimits = {
  readability: mg(0.1),
  repeatability: mg(0),
  minimum: mg(2),
  maximum: mg(3000),
  errorLimit: 0.03,
};
const letDown = (id: string, blue: number, usable = 500) => ({
  id,
  composition: of({ base: 100 - blue, blue }),
  usable: mg(usable),
});
const propose = (wrong: Partial<LetDownInput> = {}) =>
  proposeLetDown({
    target: of({ base: 94.8, white: 5, blue: 0.2 }),
    batch: mg(500),
    scale: bench,
    componentId: 'blue',
    baseId: 'base',
    stocked: [],
    ...wrong,
  });

describe('a let-down', () => {
  test('is taken from stock, the strongest that can be weighed, and its base comes off the base', () => {
    // 1 g of blue: 5 g of 20 % with 4 g of base, 10 g of 10 %; 40 % would be 2.5 g, under m_ℓ = 2.72 g.
    const found = propose({ stocked: [letDown('ten', 10), letDown('twenty', 20), letDown('forty', 40)] });
    expect(found).toMatchObject({ stockedId: 'twenty', strength: 200_000_000, mass: mg(5), make: undefined });
    expect(found?.weights).toEqual(
      new Map([
        ['base', mg(470)],
        ['white', mg(25)],
      ]),
    );
  });

  test('of which too little is left gives way to the next', () => {
    const found = propose({ stocked: [letDown('ten', 10), letDown('twenty', 20, 4.9)] });
    expect(found).toMatchObject({ stockedId: 'ten', mass: mg(10) });
  });

  test('that holds what the formula does not take, or more of something, is passed over', () => {
    const other = { id: 'other', composition: of({ clear: 80, blue: 20 }), usable: mg(500) };
    const white = { id: 'white', composition: of({ white: 99, blue: 1 }), usable: mg(500) };
    expect(propose({ stocked: [other, white] })?.stockedId).toBeUndefined();
  });

  test('is made where none lies ready: of a round strength, and a batch of it that can be weighed', () => {
    // c ≤ 500 g·0.002/2.72 g = 36.7 %: 20 %. Its own batch: 2.72 g/0.2 = 13.6 g at least; 2.8 g from 13.8 g on.
    const found = propose();
    expect(found).toMatchObject({ stockedId: undefined, strength: 200_000_000, mass: mg(5) });
    expect(found?.make?.batch).toBeGreaterThanOrEqual(mg(13.7));
    expect(found?.make?.batch).toBeLessThan(mg(15));
    expect(found?.make?.weights.get('blue')).toBe(mg(2.8));
  });

  test('is made in the amount that the batch needs where that is more', () => {
    const found = propose({ target: of({ base: 50, white: 49.9, blue: 0.1 }), batch: mg(2500) });
    // 2.5 g of blue, a little too small: 50 % is 5 g, and the least batch of it 5.5 g; 20 % in the next.
    expect(found).toMatchObject({ strength: 500_000_000, mass: mg(5) });
    expect(propose({ batch: mg(500), scale: { ...bench, minimum: mg(40) } })).toMatchObject({
      strength: 20_000_000,
      mass: mg(50),
      make: { batch: mg(2000) },
    });
  });

  test('of an odd strength is made where a round one is too strong or needs more base than there is', () => {
    // c ≤ 1 g/2.72 g = 36.7 %, and 2 g of base allow no less than 1/3.
    const found = propose({ target: of({ base: 0.4, white: 99.4, blue: 0.2 }), scale: { ...bench, minimum: mg(0) } });
    expect(found).toMatchObject({ strength: 360_000_000, mass: mg(2.8) });
    expect(propose({ target: of({ base: 0.2, white: 99.6, blue: 0.2 }) })).toBeUndefined();
  });

  test('is not needed where the component can be weighed', () => {
    expect(propose({ target: of({ base: 90, blue: 10 }) })).toBeUndefined();
  });

  test('weighs enough, adds up, and keeps every share', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 1, max: 300 }),
        fc.integer({ min: 0, max: 5000 }),
        fc.integer({ min: 1000, max: 30_000 }),
        fc.array(fc.integer({ min: 1, max: 60 }), { maxLength: 3 }),
        (blue, white, steps, strengths) => {
          const target = of({ base: 5000, ...(white > 0 ? { white } : {}), blue: blue / 10 });
          const batch = (steps * 100) as Milligrams;
          const stocked = strengths.map((strength, n) => letDown(`s${n}`, strength));
          const found = propose({ target, batch, stocked });
          if (found === undefined) return;
          const least = Math.max(bench.minimum, leastMassWithin(bench));
          expect(found.mass).toBeGreaterThanOrEqual(least);
          expect([...found.weights.values()].reduce((sum, mass) => sum + mass, found.mass as number)).toBe(batch);
          for (const [id, share] of target) {
            const end = (found.weights.get(id) ?? 0) + (found.mass * (found.composition.get(id) ?? 0)) / WHOLE;
            expect(Math.abs(end - (batch * share) / WHOLE)).toBeLessThanOrEqual(3 * bench.readability);
          }
        },
      ),
    );
  });

  test('bad input is refused by name', () => {
    expect(() => propose({ batch: -1 as Milligrams })).toThrow(MassError);
    expect(() => propose({ batch: Number.NaN as Milligrams })).toThrow(MassError);
    expect(() => propose({ batch: mg(500.05) })).toThrow(MassError);
    expect(() => propose({ scale: { ...bench, errorLimit: 0 } })).toThrow(MassError);
    expect(() => propose({ target: new Map() })).toThrow(CompositionError);
    expect(() => propose({ componentId: 'red' })).toThrow(LetDownError);
    expect(() => propose({ baseId: 'blue' })).toThrow(LetDownError);
    expect(() => propose({ stocked: [letDown('a', 10), letDown('a', 20)] })).toThrow(LetDownError);
  });
});
