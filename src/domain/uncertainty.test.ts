import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { compositionFromMasses } from './composition.ts';
import type { ShopTerms, UncertainSource } from './fold-in-uncertainty.ts';
import { MassError, type Milligrams } from './mass.ts';
import type { ScaleLimits } from './scale-limits.ts';
import { UncertaintyError, foldInUncertainty, shareUncertainty, verdictOf } from './uncertainty.ts';
import { sayShare } from './uncertainty-verdict.ts';

const mg = (grams: number) => Math.round(grams * 1000) as Milligrams;

function scaleOf(readability: number, repeatability: number): ScaleLimits {
  return {
    readability: readability as Milligrams,
    repeatability: repeatability as Milligrams,
    minimum: mg(1),
    maximum: mg(6000),
    errorLimit: 0.03,
  };
}

const fine = scaleOf(10, 20);
const bench = scaleOf(100, 80);

/** Numbers that are the same in every run: mulberry32 (public domain). */
function randomOf(seed: number): () => number {
  let state = seed;
  return () => {
    state = (state + 0x6d2b79f5) >>> 0;
    let t = Math.imul(state ^ (state >>> 15), state | 1);
    t ^= t + Math.imul(t ^ (t >>> 7), t | 61);
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296;
  };
}

/** Box and Muller. */
const normal = (random: () => number) => Math.sqrt(-2 * Math.log(1 - random())) * Math.cos(2 * Math.PI * random());

/** A reading is off by its repeatability and by the step that it is shown in. */
function errorOf(random: () => number, scale: ScaleLimits): number {
  return normal(random) * scale.repeatability + (random() - 0.5) * scale.readability;
}

/** Standard deviation of each of the numbers that `draw` gives. */
function spreadOf(draws: number, draw: () => readonly number[]): number[] {
  const sums: number[] = [];
  const squares: number[] = [];
  for (let n = 0; n < draws; n++) {
    draw().forEach((value, j) => {
      sums[j] = (sums[j] ?? 0) + value;
      squares[j] = (squares[j] ?? 0) + value * value;
    });
  }
  return sums.map((sum, j) => Math.sqrt(((squares[j] ?? 0) - (sum * sum) / draws) / draws));
}

const DRAWS = 40_000;
/** Of the standard deviation of so many draws, four times its own: 1/√(2·40000). */
const WITHIN = 0.02;

const additions = [
  { componentId: 'base', mass: mg(400), scale: bench },
  { componentId: 'white', mass: mg(90), scale: bench },
  { componentId: 'blue', mass: mg(6), scale: fine },
  { componentId: 'red', mass: mg(2), scale: fine },
  { componentId: 'base', mass: mg(30), scale: bench },
];
const ids = ['base', 'white', 'blue', 'red'];

function sharesOf(masses: readonly number[]): number[] {
  const total = masses.reduce((a, b) => a + b, 0);
  return ids.map(
    (id) => masses.reduce((sum, mass, n) => (additions[n]?.componentId === id ? sum + mass : sum), 0) / total,
  );
}

describe('the uncertainty of weighed shares, beside as many batches weighed by chance', () => {
  test('tared each time', () => {
    const random = randomOf(7);
    const drawn = spreadOf(DRAWS, () =>
      sharesOf(additions.map(({ mass, scale }) => mass + errorOf(random, scale) - errorOf(random, scale))),
    );
    const found = shareUncertainty({ additions, method: 'tare-each' });
    ids.forEach((id, j) => expect(Math.abs((found.get(id) ?? 0) / (drawn[j] ?? 1) - 1)).toBeLessThan(WITHIN));
  });

  test('cumulative, with a change of scales on the way', () => {
    const random = randomOf(11);
    const drawn = spreadOf(DRAWS, () => {
      let before = 0;
      const masses = additions.map(({ mass, scale }, n) => {
        if (n === 0 || additions[n - 1]?.scale !== scale) before = errorOf(random, scale);
        const now = errorOf(random, scale);
        const read = mass + now - before;
        before = now;
        return read;
      });
      return sharesOf(masses);
    });
    const found = shareUncertainty({ additions, method: 'cumulative' });
    ids.forEach((id, j) => expect(Math.abs((found.get(id) ?? 0) / (drawn[j] ?? 1) - 1)).toBeLessThan(WITHIN));
  });

  test('of a batch with leftovers, two of them from one parent batch', () => {
    const random = randomOf(13);
    const of = (base: number, blue: number) =>
      compositionFromMasses([
        { componentId: 'base', mass: base as Milligrams },
        { componentId: 'blue', mass: blue as Milligrams },
      ]);
    const source = (mass: number, blue: number, batchId: string, u: number): UncertainSource => ({
      composition: of(100 - blue, blue),
      mass: mg(mass),
      massUncertainty: 120,
      grade: 'untouched',
      isWaterBased: false,
      shares: new Map([
        ['base', u],
        ['blue', u],
      ]),
      batchId,
    });
    const sources = [source(200, 20, 'one', 0.002), source(100, 20, 'one', 0.002), source(150, 5, 'two', 0.001)];
    const fresh = [{ componentId: 'base', mass: mg(50), massUncertainty: 120 }];
    const terms = { wallResidue: 0, pressContamination: 0, evaporation: 0, lotStrength: 0, assumed: 0 };
    const drawn = spreadOf(DRAWS, () => {
      const off = new Map([
        ['one', normal(random) * 0.002],
        ['two', normal(random) * 0.001],
      ]);
      let [blue, total] = [0, mg(50) + normal(random) * 120];
      for (const { mass, massUncertainty, composition, batchId } of sources) {
        const poured = mass + normal(random) * massUncertainty;
        blue += poured * ((composition.get('blue') ?? 0) / 1e9 + (off.get(batchId) ?? 0));
        total += poured;
      }
      return [blue / total];
    });
    const found = foldInUncertainty({ sources, fresh }, terms).get('blue') ?? 0;
    expect(Math.abs(found / (drawn[0] ?? 1) - 1)).toBeLessThan(WITHIN);
    // Taken as independent they would look surer than they are.
    const apart = sources.map((one, n) => ({ ...one, batchId: String(n) }));
    expect(foldInUncertainty({ sources: apart, fresh }, terms).get('blue') ?? 0).toBeLessThan(found * 0.9);
  });
});

describe('the uncertainty of shares', () => {
  const u = Math.sqrt(100 ** 2 / 12 + 80 ** 2);
  const plain = [400, 80, 20].map((grams, n) => ({ componentId: ids[n] ?? '', mass: mg(grams), scale: bench }));

  test('tared each time is [(1 − 2r)u² + r²Σu²]/W², u² being of two readings', () => {
    const found = shareUncertainty({ additions: plain, method: 'tare-each' });
    for (const [id, r] of [
      ['base', 0.8],
      ['white', 0.16],
      ['blue', 0.04],
    ] as const) {
      const variance = ((1 - 2 * r) * 2 * u ** 2 + r ** 2 * 3 * 2 * u ** 2) / mg(500) ** 2;
      expect(found.get(id)).toBeCloseTo(Math.sqrt(variance), 12);
    }
  });

  test('cumulative is (2 + 2r²)u²/W² in the middle and (1 + (1 − r)² + r²)u²/W² at the ends', () => {
    const found = shareUncertainty({ additions: plain, method: 'cumulative' });
    const end = (r: number) => (Math.sqrt(1 + (1 - r) ** 2 + r ** 2) * u) / mg(500);
    expect(found.get('base')).toBeCloseTo(end(0.8), 12);
    expect(found.get('white')).toBeCloseTo((Math.sqrt(2 + 2 * 0.16 ** 2) * u) / mg(500), 12);
    expect(found.get('blue')).toBeCloseTo(end(0.04), 12);
  });

  test('is none where there is one component alone, and a number everywhere', () => {
    expect(shareUncertainty({ additions: plain.slice(0, 1), method: 'cumulative' }).get('base')).toBe(0);
    const anyAdditions = fc.array(
      fc.record({
        componentId: fc.constantFrom(...ids),
        mass: fc.integer({ min: 0, max: 5_000_000 }),
        scale: fc.constantFrom(fine, bench),
      }),
      { minLength: 1, maxLength: 12 },
    );
    fc.assert(
      fc.property(anyAdditions, fc.constantFrom('tare-each' as const, 'cumulative' as const), (any, method) => {
        fc.pre(any.some(({ mass }) => mass > 0));
        const given = any.map((one) => ({ ...one, mass: one.mass as Milligrams }));
        for (const value of shareUncertainty({ additions: given, method }).values()) {
          expect(value).toBeGreaterThanOrEqual(0);
          expect(Number.isFinite(value)).toBe(true);
        }
      }),
    );
  });

  test.each([
    ['nothing weighed in', [], UncertaintyError],
    ['a negative mass', [{ ...plain[0], mass: -1 }], MassError],
    ['a mass that is no number', [{ ...plain[0], mass: Number.NaN }], MassError],
    ['a scale without a step', [{ ...plain[0], scale: { ...bench, readability: 0 } }], MassError],
  ])('with %s is refused by name', (_, wrong, error) => {
    const given = wrong as unknown as typeof plain;
    expect(() => shareUncertainty({ additions: given, method: 'tare-each' })).toThrow(error as typeof MassError);
  });
});

describe('what a leftover adds', () => {
  const terms: ShopTerms = {
    wallResidue: 0.001,
    pressContamination: 0.002,
    evaporation: 0.01,
    lotStrength: 0.03,
    assumed: 0.02,
  };
  const source: UncertainSource = {
    composition: compositionFromMasses([
      { componentId: 'base', mass: mg(90) },
      { componentId: 'blue', mass: mg(10) },
    ]),
    mass: mg(100),
    massUncertainty: 0,
    grade: 'untouched',
    isWaterBased: false,
    shares: new Map(),
    batchId: 'one',
  };
  const of = (change: Partial<UncertainSource>) =>
    foldInUncertainty({ sources: [{ ...source, ...change }], fresh: [] }, terms).get('blue') ?? 0;

  test('grows with its grade: untouched, returned, assumed', () => {
    expect(of({})).toBeCloseTo(0.03 * 0.1 * 0.9, 9);
    expect(of({ grade: 'returned' })).toBeCloseTo(Math.hypot(0.0027, 0.001, 0.002), 9);
    expect(of({ grade: 'assumed' })).toBe(0.02);
  });

  test('is more where water can have gone', () => {
    expect(of({ isWaterBased: true })).toBeCloseTo(Math.hypot(0.0027, 0.01 * 0.1), 9);
  });

  test('has no figure where its contents are unknown, nor from a term that is no number', () => {
    expect(() => of({ grade: 'unknown' })).toThrow(UncertaintyError);
    expect(() => foldInUncertainty({ sources: [source], fresh: [] }, { ...terms, assumed: Number.NaN })).toThrow(
      /assumed/,
    );
  });
});

describe('the verdict', () => {
  test('is on target, off, or not to be told', () => {
    expect(verdictOf(0.004, 0.002, 0.01)).toBe('on-target');
    expect(verdictOf(-0.008, 0.002, 0.01)).toBe('cannot-tell');
    expect(verdictOf(-0.012, 0.002, 0.01)).toBe('cannot-tell');
    expect(verdictOf(0.015, 0.002, 0.01)).toBe('off');
    expect(() => verdictOf(Number.NaN, 0, 0)).toThrow(UncertaintyError);
  });

  test('is said in words, rounded outwards', () => {
    expect(sayShare('Blue', 0.12, 0.0005, 'en')).toBe('Blue is 12.0 %; the scale cannot tell it from 11.9 to 12.1 %.');
    expect(sayShare('Blue', 0.12, 0.0006, 'en')).toBe('Blue is 12.0 %; the scale cannot tell it from 11.8 to 12.2 %.');
    expect(sayShare('Black', 0.0027, 0.00002, 'en')).toBe(
      'Black is 0.270 %; the scale cannot tell it from 0.266 to 0.274 %.',
    );
    expect(sayShare('Base', 1, 0, 'en')).toBe('Base is 100.0 %.');
  });
});
