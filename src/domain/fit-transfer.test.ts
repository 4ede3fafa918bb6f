import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { InkNeedError, type InkRun, fitTransfer } from './ink-need.ts';
import type { Milligrams } from './mass.ts';

const mg = (grams: number) => Math.round(grams * 1000) as Milligrams;

/** A run of so many prints of 0.4 g at transfer 1. */
function runOf(prints: number, screens: number, transfer: number, loss: number, off = 0): InkRun {
  const theoretical = mg(prints * 0.4);
  return { theoretical, prints, screens, used: mg((theoretical * transfer) / 1000 + screens * loss + off) };
}

const RUNS: readonly [number, number][] = [
  [60, 1],
  [120, 1],
  [300, 2],
  [90, 3],
  [500, 1],
  [150, 4],
];

describe('transfer and loss in the screen', () => {
  test('are found apart in runs of other lengths and screens', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 0.2, max: 1.5, noNaN: true }),
        fc.double({ min: 0, max: 60, noNaN: true }),
        (transfer, loss) => {
          const fitted = fitTransfer(RUNS.map(([prints, screens]) => runOf(prints, screens, transfer, loss)));
          if (fitted === 'too-few-runs') throw new Error('There are six runs.');
          expect(fitted.transfer.likely).toBeCloseTo(transfer, 3);
          expect(fitted.screenLoss.likely / 1000).toBeCloseTo(loss, 1);
          expect(fitted.transfer.high - fitted.transfer.low).toBeLessThan(0.01);
        },
      ),
    );
  });

  test('show how far the runs spread', () => {
    const off = [4, -5, 6, -4, 5, -6];
    const fitted = fitTransfer(RUNS.map(([prints, screens], n) => runOf(prints, screens, 0.8, 15, off[n])));
    if (fitted === 'too-few-runs') throw new Error('There are six runs.');
    const { low, likely, median, high } = fitted.transfer;
    expect(low).toBeLessThan(Math.min(likely, median));
    expect(high).toBeGreaterThan(Math.max(likely, median));
    expect(likely).toBeGreaterThan(0.7);
    expect(likely).toBeLessThan(0.9);
  });

  test('are not guessed from four runs, nor from runs that do not tell them apart', () => {
    const four = RUNS.slice(0, 4).map(([prints, screens]) => runOf(prints, screens, 0.8, 15));
    expect(fitTransfer(four)).toBe('too-few-runs');
    const alike = [1, 2, 3, 4, 5, 6].map((screens) => runOf(100 * screens, screens, 0.8, 15));
    expect(fitTransfer(alike)).toBe('too-few-runs');
  });

  test('a loss is never below nothing', () => {
    const off = [10, 5, 0, -30, 20, -40];
    const fitted = fitTransfer(RUNS.map(([prints, screens], n) => runOf(prints, screens, 0.8, 5, off[n])));
    if (fitted === 'too-few-runs') throw new Error('There are six runs.');
    expect(fitted.screenLoss.low).toBeGreaterThanOrEqual(0);
    expect(fitted.screenLoss.likely).toBe(0);
    expect(fitted.transfer.likely).toBeGreaterThan(0);
  });

  test.each([
    ['no prints', { prints: 0 }],
    ['nothing in theory', { theoretical: mg(0) }],
    ['less than nothing used', { used: mg(-5) }],
    ['a screen and a half', { screens: 1.5 }],
    ['a mass that is no number', { used: Number.NaN as Milligrams }],
  ])('a run with %s is refused', (_, wrong) => {
    expect(() => fitTransfer([{ ...runOf(100, 1, 1, 1), ...wrong }])).toThrow(InkNeedError);
  });
});
