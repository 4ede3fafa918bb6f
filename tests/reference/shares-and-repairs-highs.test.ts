import { describe, expect, test } from 'vitest';
import type { Milligrams, PartsPerBillion } from '#domain/mass.ts';
import { repairOvershoot } from '#domain/repair-overshoot.ts';
import { whatItCanBecome } from '#domain/what-it-can-become.ts';
import { askHighs } from '#scripts/bench/ask-highs.ts';
import { makeShop } from '#scripts/bench/fold-in-shop.ts';
import { makeBook } from '#scripts/bench/formula-book.ts';
import { makeRepairs } from '#scripts/bench/repair-cases.ts';
import { repairLp } from '#scripts/bench/repair-lp.ts';
import { shareLp } from '#scripts/bench/share-lp.ts';

const STEP = 100 as Milligrams;
const NONE: ReadonlyMap<string, PartsPerBillion> = new Map();

// HiGHS (MIT licence), a general solver, is asked the same as a linear program; its own tolerance is 10⁻⁷ a row.
describe('a general solver finds the same', () => {
  test('largest share of a formula that a bucket can be', async () => {
    const book = makeBook(3, 200);
    const { buckets } = makeShop(4, { buckets: 25, tolerance: true, maximumBuckets: 3, worthOpening: 0 as Milligrams });
    let usable = 0;
    for (const [n, bucket] of buckets.entries()) {
      const isStrict = n % 2 === 0;
      const toleranceOf = (id: string) =>
        isStrict ? NONE : (book.find((entry) => entry.id === id)?.tolerance ?? NONE);
      const found = whatItCanBecome(bucket, book, STEP, toleranceOf);
      const shares = new Map(found.map(({ formulaId, largestShare }) => [formulaId, largestShare] as const));
      const asked = [found[0], found.at(-1)].flatMap((entry) => (entry === undefined ? [] : [entry.formulaId]));
      usable += asked.length;
      for (const { id, target } of book.filter((entry, k) => k === n || asked.includes(entry.id))) {
        const highs = await askHighs(shareLp(bucket.composition, target, toleranceOf(id)), 10);
        expect(Math.abs((shares.get(id) ?? 0) / 1e9 - highs.objective)).toBeLessThan(1e-6);
      }
    }
    expect(usable).toBeGreaterThan(10);
  });

  test('least batch that an overshot pot can become', async () => {
    const grown: number[] = [];
    for (const input of makeRepairs(5, 60)) {
      const { state, choices } = repairOvershoot(input);
      const highs = await askHighs(repairLp(input), 10);
      const above = (choices[0]?.batch ?? Number.NaN) - highs.objective * 1000;
      // Rounded up to the next whole step above what lies in the pot; HiGHS is good to about a milligram.
      expect(above).toBeGreaterThan(-1);
      expect(above).toBeLessThan(STEP + 1);
      if (state === 'over') grown.push(highs.objective);
    }
    expect(grown.length).toBeGreaterThan(20);
  });

  test('that no fresh ink repairs a foreign component', async () => {
    const [input] = makeRepairs(6, 1);
    if (input === undefined) throw new Error('One case was asked for.');
    const stray = { composition: new Map([['stray', 1e9 as PartsPerBillion]]), mass: STEP };
    const spoilt = { ...input, contents: [...input.contents, stray] };
    expect(repairOvershoot(spoilt).state).toBe('beyond-repair');
    expect((await askHighs(repairLp(spoilt), 10)).feasible).toBe(false);
  });
});
