import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { type Composition, CompositionError, compositionFromParts } from './composition.ts';
import { MassError, type Milligrams, type PartsPerBillion, WHOLE } from './mass.ts';
import { FormulaError, whatItCanBecome } from './what-it-can-become.ts';

type Tolerance = ReadonlyMap<string, PartsPerBillion>;

const NONE: Tolerance = new Map();
const ids = ['base', 'white', 'blue', 'red', 'black'];
const of = (parts: Record<string, number>): Composition =>
  compositionFromParts(Object.entries(parts).map(([componentId, part]) => ({ componentId, parts: String(part) })));
const ppb = (share: number) => Math.round(share * WHOLE) as PartsPerBillion;
const mg = (grams: number) => Math.round(grams * 1000) as Milligrams;
const become = (composition: Composition, target: Composition, tolerance = NONE, usable = mg(300), d = mg(0.1)) =>
  whatItCanBecome({ usable, composition }, [{ id: 'f', target }], d, () => tolerance)[0];

/** The conditions of core mathematics B for `over`/`under` of the batch, term by term. */
function fits(over: bigint, under: bigint, composition: Composition, target: Composition, tolerance: Tolerance) {
  const all = new Set([...composition.keys(), ...target.keys()]);
  let sum = 0n;
  for (const id of all) {
    const held = over * BigInt(composition.get(id) ?? 0);
    const [share, off] = [target.get(id) ?? 0, tolerance.get(id) ?? 0];
    if (held > under * BigInt(share + off)) return false;
    const edge = under * BigInt(Math.max(0, share - off));
    sum += held > edge ? held : edge;
  }
  return sum <= under * BigInt(WHOLE);
}

const anyParts = fc
  .uniqueArray(fc.constantFrom(...ids), { minLength: 1, maxLength: 5 })
  .chain((some) =>
    fc
      .tuple(...some.map(() => fc.integer({ min: 1, max: 999_999 })))
      .map((parts) => of(Object.fromEntries(some.map((id, n) => [id, parts[n] ?? 1])))),
  );
const anyTolerance = fc
  .tuple(...ids.map(() => fc.oneof(fc.constant(0), fc.integer({ min: 0, max: 2e8 }))))
  .map((offs) => new Map(ids.map((id, n) => [id, (offs[n] ?? 0) as PartsPerBillion] as const)));
const anyCase = fc.record({
  composition: anyParts,
  target: anyParts,
  tolerance: fc.oneof(fc.constant(NONE), anyTolerance),
  usable: fc.integer({ min: 1, max: 1_000_000 }),
  step: fc.constantFrom(1, 10, 100, 1000),
});

describe('what a bucket can become', () => {
  test('a light blue from a dark one: the batch at which its blue is the right share', () => {
    const found = become(of({ base: 60, blue: 40 }), of({ base: 90, blue: 10 }));
    expect(found).toEqual({ formulaId: 'f', largestShare: ppb(0.25), smallestBatch: mg(1200) });
  });

  test('is itself in whole, from the mass it has', () => {
    const same = of({ base: 60, blue: 40 });
    expect(become(same, same)).toEqual({ formulaId: 'f', largestShare: WHOLE, smallestBatch: mg(300) });
  });

  test('nothing, where it holds what the formula does not take', () => {
    expect(become(of({ base: 60, red: 1 }), of({ base: 90, blue: 10 }))).toBeUndefined();
  });

  test('a foreign component goes in up to its own tolerance', () => {
    const tolerance = new Map([
      ['red', ppb(0.001)],
      ['base', ppb(0.05)],
    ]);
    // Red is a hundredth of it and may be a thousandth of the batch: a tenth.
    const found = become(of({ base: 99, red: 1 }), of({ base: 90, blue: 10 }), tolerance);
    expect(found).toMatchObject({ largestShare: ppb(0.1), smallestBatch: mg(3000) });
  });

  test('a foreign component finds no room where nothing else may be short', () => {
    const tolerance = new Map([['red', ppb(0.001)]]);
    expect(become(of({ base: 99, red: 1 }), of({ base: 90, blue: 10 }), tolerance)).toBeUndefined();
  });

  test('the batch comes from the exact share, rounded up to the scale; the share is rounded down', () => {
    // One third: 300 g make 900 g, where a share of 333,333,333 ppb would make 900.1 g.
    const found = become(of({ base: 70, blue: 30 }), of({ base: 90, blue: 10 }));
    expect(found).toEqual({ formulaId: 'f', largestShare: 333_333_333, smallestBatch: mg(900) });
    expect(become(of({ base: 40, blue: 60 }), of({ base: 90, blue: 9.9 }))?.smallestBatch).toBe(mg(1816.4));
  });

  test('is the largest share that meets the conditions, to the last ppb, and the least batch to the last step', () => {
    fc.assert(
      fc.property(anyCase, ({ composition, target, tolerance, usable, step }) => {
        const found = become(composition, target, tolerance, usable as Milligrams, step as Milligrams);
        const share = BigInt(found?.largestShare ?? 0);
        const may = (over: bigint, under: bigint) => fits(over, under, composition, target, tolerance);
        expect(may(share, BigInt(WHOLE))).toBe(true);
        if (share < BigInt(WHOLE)) expect(may(share + 1n, BigInt(WHOLE))).toBe(false);
        if (found === undefined) return;
        expect(found.smallestBatch % step).toBe(0);
        const smaller = BigInt(found.smallestBatch - step);
        expect(may(BigInt(usable), BigInt(found.smallestBatch))).toBe(true);
        expect(smaller >= BigInt(usable) && may(BigInt(usable), smaller)).toBe(false);
      }),
      { numRuns: 2000 },
    );
  });

  test('on a grid of a thousandth no share that fits is greater', () => {
    const [composition, target] = [of({ base: 50, blue: 30, red: 20 }), of({ base: 70, blue: 20, white: 10 })];
    const tolerance = new Map(ids.map((id) => [id, ppb(0.02)]));
    const grid = Array.from({ length: 1001 }, (_, n) => n);
    const most = Math.max(...grid.filter((n) => fits(BigInt(n), 1000n, composition, target, tolerance)));
    // Red stops it at 0.02/0.2.
    expect(most).toBe(100);
    expect(become(composition, target, tolerance)?.largestShare).toBe(ppb(0.1));
  });

  test('a tolerance of nothing is the same as none', () => {
    const zero = new Map(ids.map((id) => [id, 0 as PartsPerBillion]));
    fc.assert(
      fc.property(anyParts, anyParts, (composition, target) => {
        expect(become(composition, target, zero)).toEqual(become(composition, target));
      }),
    );
  });

  test('the largest share comes first, by its exact value; equal ones by their id', () => {
    const composition = of({ base: 2, blue: 1 });
    const third = of({ base: 8, blue: 1 });
    const [base, blue] = [third.get('base') ?? 0, third.get('blue') ?? 0];
    const barely = new Map([
      ['base', (base - 1) as PartsPerBillion],
      ['blue', (blue + 1) as PartsPerBillion],
    ]);
    const formulas = [
      { id: 'z', target: third },
      { id: 'a', target: third },
      { id: 'none', target: of({ red: 1 }) },
      { id: 'more', target: barely },
    ];
    const found = whatItCanBecome({ usable: mg(1), composition }, formulas, mg(0.1), () => NONE);
    expect(found.map(({ formulaId }) => formulaId)).toEqual(['more', 'a', 'z']);
  });

  test('1 mg and 1,000 kg, 24 components', () => {
    const wide = of(Object.fromEntries(Array.from({ length: 24 }, (_, n) => [`c${n}`, n + 1])));
    const least = 1 as Milligrams;
    expect(become(wide, wide, NONE, least, least)).toMatchObject({ largestShare: WHOLE, smallestBatch: 1 });
    const most = 1_000_000_000 as Milligrams;
    expect(become(wide, wide, NONE, most, least)).toMatchObject({ largestShare: WHOLE, smallestBatch: most });
  });

  test('a formula that would need more than any mass is left out', () => {
    const tolerance = new Map(['blue', 'red'].map((id) => [id, 1 as PartsPerBillion] as const));
    const [red, blue] = [of({ red: 1 }), of({ base: 1, blue: 1 })];
    expect(become(red, blue, tolerance, mg(9_000))).toMatchObject({ largestShare: 1, smallestBatch: mg(9e12) });
    expect(become(red, blue, tolerance, mg(10_000))).toBeUndefined();
  });

  test('bad input is refused by name', () => {
    const good = of({ base: 1 });
    const half = new Map([['base', ppb(0.5)]]);
    const bad = (value: number) => value as Milligrams;
    expect(() => become(good, good, NONE, bad(-1))).toThrow(MassError);
    expect(() => become(good, good, NONE, bad(Number.NaN))).toThrow(MassError);
    expect(() => become(good, good, NONE, mg(1), bad(0))).toThrow(MassError);
    expect(() => become(half, good)).toThrow(CompositionError);
    expect(() => become(good, half)).toThrow(CompositionError);
    expect(() => become(good, good, new Map([['base', Number.NaN as PartsPerBillion]]))).toThrow(MassError);
    const twice = [1, 2].map(() => ({ id: 'f', target: good }));
    expect(() => whatItCanBecome({ usable: mg(1), composition: good }, twice, mg(0.1), () => NONE)).toThrow(
      FormulaError,
    );
  });
});
