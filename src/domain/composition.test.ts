import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import {
  type Composition,
  CompositionError,
  blend,
  compositionFromMasses,
  compositionFromParts,
} from './composition.ts';
import { MassError, type Milligrams, WHOLE, milligrams, partsPerBillion } from './mass.ts';

const IDS = ['base', 'white', 'blue', 'red', 'black'];
const sumOf = (composition: Composition) => [...composition.values()].reduce((a, b) => a + b, 0);
const anyMasses = fc
  .array(fc.integer({ min: 0, max: 5_000_000 }), { minLength: 5, maxLength: 5 })
  .filter((masses) => masses.some((mass) => mass > 0))
  .map((masses) => masses.map((mass, n) => ({ componentId: IDS[n] as string, mass: mass as Milligrams })));
const anySource = fc.record({
  composition: anyMasses.map(compositionFromMasses),
  mass: fc.integer({ min: 1, max: 9_000_000 }).map((mass) => mass as Milligrams),
});

describe('a composition', () => {
  test('thirds add up to the whole: the first takes the odd part', () => {
    const parts = ['a', 'b', 'c'].map((componentId) => ({ componentId, parts: '1' }));
    expect([...compositionFromParts(parts).values()]).toEqual([333_333_334, 333_333_333, 333_333_333]);
  });

  test('decimal parts are exact where floating point is not', () => {
    const parts = [
      { componentId: 'a', parts: '0.1' },
      { componentId: 'b', parts: '0.2' },
      { componentId: 'c', parts: '0.7' },
    ];
    expect([...compositionFromParts(parts).values()]).toEqual([100_000_000, 200_000_000, 700_000_000]);
  });

  test('adds up to exactly a billion and has no zero entry, whatever was weighed', () => {
    fc.assert(
      fc.property(anyMasses, (masses) => {
        const composition = compositionFromMasses(masses);
        expect(sumOf(composition)).toBe(WHOLE);
        expect(Math.min(...composition.values())).toBeGreaterThan(0);
      }),
    );
  });

  test('blending is associative within 2 ppb a step', () => {
    fc.assert(
      fc.property(anySource, anySource, anySource, (a, b, c) => {
        const mix = (x: typeof a, y: typeof a) => ({
          composition: blend([x, y]),
          mass: (x.mass + y.mass) as Milligrams,
        });
        const left = mix(mix(a, b), c).composition;
        const right = mix(a, mix(b, c)).composition;
        for (const id of IDS) expect(Math.abs((left.get(id) ?? 0) - (right.get(id) ?? 0))).toBeLessThanOrEqual(4);
      }),
    );
  });

  test('a blend does not depend on the order of its sources', () => {
    fc.assert(
      fc.property(anySource, anySource, (a, b) => {
        expect(new Map([...blend([a, b])].sort())).toEqual(new Map([...blend([b, a])].sort()));
      }),
    );
  });

  test.each([
    ['words', [{ componentId: 'a', parts: 'many' }]],
    ['a negative part', [{ componentId: 'a', parts: '-1' }]],
    ['an exponent', [{ componentId: 'a', parts: '1e3' }]],
    ['nothing', []],
    ['only zeros', [{ componentId: 'a', parts: '0' }]],
    [
      'one component twice',
      [
        { componentId: 'a', parts: '1' },
        { componentId: 'a', parts: '2' },
      ],
    ],
  ])('%s is refused by name', (_, parts) => {
    expect(() => compositionFromParts(parts)).toThrow(CompositionError);
  });
});

describe('a mass and a share', () => {
  test.each([-1, 0.5, Number.NaN, Infinity, 2 ** 53])('%d is no mass and no share', (value) => {
    expect(() => milligrams(value)).toThrow(MassError);
    expect(() => partsPerBillion(value)).toThrow(MassError);
  });

  test('more than the whole is no share', () => {
    expect(() => partsPerBillion(1_000_000_001)).toThrow(MassError);
  });
});
