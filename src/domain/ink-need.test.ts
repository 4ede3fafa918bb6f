import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { InkNeedError, inkNeed } from './ink-need.ts';
import type { Milligrams } from './mass.ts';

const mg = (grams: number) => Math.round(grams * 1000) as Milligrams;
const run = {
  areaMm2: 8000,
  coverage: 0.65,
  inkVolumeCm3PerM2: 55,
  transfer: { low: 0.6, likely: 0.8, high: 1 },
  strokeFactor: 1,
  densityGPerCm3: 1.2,
  prints: 300,
  spoilage: 0.05,
  setUpPrints: 4,
  screens: 2,
  screenLoss: mg(15),
  screenCharge: mg(120),
};

describe('the ink a run needs', () => {
  test('is what the prints take, what the screens keep, and what lies in them meanwhile', () => {
    const { perPrint, uses, ready, expectBack } = inkNeed(run);
    // 80 cm² × 0.65 × 55/10⁴ cm³/cm² × 1.2 g/cm³ = 0.3432 g at transfer 1; 300 × 1.05 + 4 = 319 prints.
    expect(perPrint.high).toBe(343);
    expect(uses.likely).toBe(Math.round(343.2 * 0.8 * 319) + 30_000);
    expect(ready.likely - uses.likely).toBe(240_000);
    expect(expectBack).toEqual({ low: 240_000, likely: 240_000, high: 240_000 });
  });

  test('grows with transfer, coverage, area and prints, and is never out of order', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 0.01, max: 1, noNaN: true }),
        fc.integer({ min: 1, max: 50_000 }),
        (coverage, prints) => {
          const need = inkNeed({ ...run, coverage, prints });
          expect(need.uses.low).toBeLessThanOrEqual(need.uses.likely);
          expect(need.uses.likely).toBeLessThanOrEqual(need.uses.high);
          const more = inkNeed({ ...run, coverage, prints: prints + 1 });
          expect(more.uses.likely).toBeGreaterThanOrEqual(need.uses.likely);
        },
      ),
    );
  });

  test('of no prints is what the screens keep', () => {
    expect(inkNeed({ ...run, prints: 0, setUpPrints: 0 }).uses.likely).toBe(30_000);
  });

  test.each([
    ['a coverage above 1', { coverage: 65 }, /coverage/],
    ['an area of nothing', { areaMm2: 0 }, /areaMm2/],
    ['a density that is no number', { densityGPerCm3: Number.NaN }, /density/],
    ['half a print', { prints: 0.5 }, /prints/],
    ['a transfer out of order', { transfer: { low: 1, likely: 0.8, high: 0.9 } }, /transfer/],
    ['a negative loss', { screenLoss: -1 as Milligrams }, /screenLoss/],
    ['more ink than can be counted', { areaMm2: Number.POSITIVE_INFINITY }, /more ink/],
  ])('%s is refused in words', (_, wrong, words) => {
    expect(() => inkNeed({ ...run, ...wrong })).toThrow(InkNeedError);
    expect(() => inkNeed({ ...run, ...wrong })).toThrow(words);
  });
});
