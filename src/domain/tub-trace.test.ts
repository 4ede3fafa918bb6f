import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { type HistoryEntry, histories } from '#tests/support/tub-history.ts';
import type { SeenEntry } from './seen.ts';
import { discardedTub, issuedTub, recountedTub, relocatedTub, takenFromTub } from './tub-effects.ts';
import { type TubEffect, type TubFields, changeTub } from './tub-trace.ts';

const tub: TubFields = {
  state: 'shelf',
  locationId: 'S1',
  jobId: null,
  tareMg: 68,
  balanceMg: 100,
  grade: 'untouched',
  generation: 0,
  needsRecount: false,
  seen: {},
};
const fold = (entries: readonly HistoryEntry[], from = tub) =>
  entries.reduce((changed, { effect, ...entry }) => changeTub(changed, entry, effect), from);
const by = (installId: string, deviceSeq: number, effect: TubEffect, seen: SeenEntry['seen'] = {}): HistoryEntry => ({
  opId: `${installId}${deviceSeq}`,
  installId,
  deviceSeq,
  seen,
  effect,
});

describe('a tub', () => {
  test('is the same in all its fields by any order in which its entries arrive', () => {
    fc.assert(
      fc.property(
        histories.chain((all) => fc.tuple(fc.constant(all), fc.shuffledSubarray(all, { minLength: all.length }))),
        ([entries, shuffled]) => {
          expect(fold(shuffled)).toEqual(fold(entries));
        },
      ),
      { numRuns: 500 },
    );
  });

  test('is what the last entry says that had seen the others, even when it arrives first', () => {
    const [issue, move] = [
      by('a', 5, issuedTub({ jobId: 'J' })),
      by('b', 1, relocatedTub({ locationId: 'S2' }), { a: 5 }),
    ];
    expect(fold([move, issue])).toMatchObject({ state: 'at-press', locationId: 'S2', jobId: 'J' });
  });

  test('that was thrown away and is weighed with ink in it stands on the shelf again', () => {
    const gone = by('a', 1, discardedTub({ displayedMg: 100 }));
    const found = by('b', 1, recountedTub({ grossMg: 98, tareMg: 68, deltaMg: 30 }), { a: 1 });
    for (const entries of [
      [gone, found],
      [found, gone],
    ])
      expect(fold(entries)).toMatchObject({ state: 'shelf', balanceMg: 30, needsRecount: false });
  });

  test('that was thrown away after it was weighed stays thrown away', () => {
    const weighed = by('a', 1, recountedTub({ grossMg: 98, tareMg: 68, deltaMg: -70 }));
    const gone = by('b', 1, discardedTub({ displayedMg: 30 }), { a: 1 });
    for (const entries of [
      [gone, weighed],
      [weighed, gone],
    ])
      expect(fold(entries)).toMatchObject({ state: 'discarded', balanceMg: 0, needsRecount: false });
  });

  test('of which the books from before tell a flag keeps it until it is weighed', () => {
    const before = { ...tub, needsRecount: true, seen: { a: 3 } };
    const moved = by('b', 1, relocatedTub({ locationId: 'S2' }), { a: 3 });
    const weighed = by('b', 2, recountedTub({ grossMg: 98, tareMg: 68, deltaMg: -70 }), { a: 3, b: 1 });
    expect(fold([moved], before).needsRecount).toBe(true);
    expect(fold([moved, weighed], before).needsRecount).toBe(false);
    expect(
      fold([by('b', 1, takenFromTub({ actualMg: 10, empties: false }, 100), { a: 2 })], {
        ...before,
        needsRecount: false,
      }).needsRecount,
    ).toBe(true);
  });
});
