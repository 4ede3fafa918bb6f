import { describe, expect, test } from 'vitest';
import { areaOf, coverageOf } from '#domain/coverage.ts';
import { inkNeed } from '#domain/ink-need.ts';
import type { Milligrams } from '#domain/mass.ts';
import { GRAMS_PER_POUND } from '#domain/units.ts';

const run = {
  areaMm2: 8000,
  coverage: 0.65,
  inkVolumeCm3PerM2: 55,
  transfer: { low: 1, likely: 1, high: 1 },
  strokeFactor: 1,
  densityGPerCm3: 1.2,
  prints: 300,
  spoilage: 0.05,
  setUpPrints: 0,
  screens: 0,
  screenLoss: 0 as Milligrams,
  screenCharge: 0 as Milligrams,
};

describe('ink need', () => {
  test('by hand: 43/cm, 80 cm² at 65 %, 55 cm³/m², 1.2 g/cm³: 0.343 g a print, 108 g for 300 and 5 %', () => {
    // Worked by hand from the definition of the theoretical ink volume; no outside source.
    const { perPrint, uses } = inkNeed(run);
    expect(perPrint.likely / 1000).toBeCloseTo(0.343, 3);
    expect(uses.likely / 1000).toBeCloseTo(108, 0);
  });

  test('3 g a print: 1814 prints out of a US gallon of 12 lb', () => {
    // A trade article of 2011 (read).
    const areaMm2 = (3 / (0.65 * (55 / 10_000) * 1.2)) * 100;
    const { uses } = inkNeed({ ...run, areaMm2, spoilage: 0, prints: 1814 });
    expect(uses.likely / 1000).toBeLessThanOrEqual(12 * GRAMS_PER_POUND);
    expect(inkNeed({ ...run, areaMm2, spoilage: 0, prints: 1815 }).uses.likely / 1000).toBeGreaterThan(
      12 * GRAMS_PER_POUND,
    );
  });

  test('a picture with a mean grey value of 246.77 is covered to 3.23 %', () => {
    // A worked example of coverage by image tools (read).
    const grey = new Uint8Array(100).fill(247);
    grey.fill(246, 0, 23);
    expect(coverageOf(grey) * 100).toBeCloseTo(3.23, 2);
  });

  test('an inch of 300 pixels is 6.4516 cm²', () => {
    // 2.54 cm an inch, exact by definition.
    expect(areaOf(300 * 300, 300)).toBeCloseTo(645.16, 9);
  });
});
