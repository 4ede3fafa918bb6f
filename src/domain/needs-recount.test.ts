import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { contentOf, histories } from '#tests/support/tub-history.ts';
import { type ContentKind, MOST_OPEN, type OpenEntries, type OpenEntry, addOpen, whyRecount } from './needs-recount.ts';
import { covers, knowledgeOf } from './seen.ts';

const none: OpenEntries = { open: [] };
const fold = (entries: readonly OpenEntry[]) => entries.reduce(addOpen, none);

/** One install's entry by its number, with what it knew of others. */
function entry(installId: string, deviceSeq: number, kind: ContentKind, seen: Record<string, number> = {}): OpenEntry {
  return { installId, kind, at: knowledgeOf({ installId, deviceSeq, seen }) };
}

const later = (one: OpenEntry, other: OpenEntry) => one !== other && covers(one.at, other.at);

/** The definition, over the whole set: a pair that did not know each other, and no weighing that knew both. */
function isOpenByDefinition(entries: readonly OpenEntry[]): boolean {
  const weighings = entries.filter(({ kind }) => kind !== 'spend');
  return entries.some((one) =>
    entries.some(
      (other) =>
        one !== other &&
        !later(one, other) &&
        !later(other, one) &&
        !weighings.some((weighing) => later(weighing, one) && later(weighing, other)),
    ),
  );
}

/** Thrown away, by one or by several who did not know of each other, and nothing else since. */
function isGoneByDefinition(entries: readonly OpenEntry[]): boolean {
  const weighings = entries.filter(({ kind }) => kind !== 'spend');
  const last = entries.filter((entry) => !weighings.some((weighing) => later(weighing, entry)));
  return last.length > 0 && last.every(({ kind }) => kind === 'discard');
}

describe('a tub must be weighed again', () => {
  test.each<[string, OpenEntry[], number, string | null]>([
    ['when two stations spent from it unseen', [entry('a', 1, 'spend'), entry('b', 1, 'spend')], 100, 'both-spent'],
    [
      'when one returned it and the other took from it',
      [entry('a', 1, 'spend-weighed'), entry('b', 1, 'spend')],
      100,
      'both-spent',
    ],
    [
      'when it was re-weighed and spent unseen',
      [entry('a', 1, 'recount'), entry('b', 1, 'spend')],
      100,
      'spent-across-recount',
    ],
    [
      'when two stations re-weighed it unseen',
      [entry('a', 1, 'recount'), entry('b', 1, 'recount')],
      100,
      'weighed-twice',
    ],
    [
      'when one threw it away and another spent it',
      [entry('a', 1, 'discard'), entry('b', 1, 'spend')],
      0,
      'spent-and-discarded',
    ],
    ['when the books hold less than nothing', [entry('a', 1, 'spend')], -1, 'below-nothing'],
    [
      'not when the second spend had seen the first',
      [entry('a', 1, 'spend'), entry('b', 1, 'spend', { a: 1 })],
      0,
      null,
    ],
    [
      'not when two stations threw it away: it is gone',
      [entry('a', 1, 'discard'), entry('b', 1, 'discard')],
      -100,
      null,
    ],
  ])('%s', (_, entries, balance, reason) => {
    expect(whyRecount(fold(entries), balance)).toBe(reason);
    expect(whyRecount(fold([...entries].reverse()), balance)).toBe(reason);
  });

  test('until a recount that has seen both spends, and not one that has seen only one of them', () => {
    const spends = [entry('a', 1, 'spend'), entry('b', 1, 'spend')];
    expect(whyRecount(fold([...spends, entry('c', 1, 'recount', { a: 1 })]), 0)).not.toBeNull();
    expect(whyRecount(fold([...spends, entry('c', 1, 'recount', { a: 1, b: 1 })]), 0)).toBeNull();
  });

  test('when a spend comes late that the recount had not seen', () => {
    const settled = [entry('a', 1, 'spend'), entry('c', 1, 'recount', { a: 1 })];
    expect(whyRecount(fold(settled), 0)).toBeNull();
    expect(whyRecount(fold([...settled, entry('b', 9, 'spend', { a: 1 })]), 0)).toBe('spent-across-recount');
  });
});

describe('open entries', () => {
  test('are what the definition says, by any order of arrival', () => {
    fc.assert(
      fc.property(
        histories.chain((all) => {
          const entries = contentOf(all);
          return fc.tuple(fc.constant(entries), fc.shuffledSubarray(entries, { minLength: entries.length }));
        }),
        ([entries, shuffled]) => {
          const folded = fold(shuffled);
          expect(folded).toEqual(fold(entries));
          const [open, gone] = [isOpenByDefinition(entries), isGoneByDefinition(entries)];
          expect(whyRecount(folded, 0) !== null).toBe(open && !gone);
          expect(whyRecount(folded, -1) !== null).toBe(!gone);
        },
      ),
      { numRuns: 500 },
    );
  });

  test('of one station that goes on spending are one', () => {
    const entries = Array.from({ length: 500 }, (_, n) => entry('a', n + 1, 'spend'));
    expect(fold(entries).open).toEqual([entry('a', 500, 'spend')]);
  });

  test('stay few however long two stations take turns, and a weighing that has seen all of it settles them', () => {
    let folded = none;
    let seen: Record<string, number> = {};
    for (let n = 1; n <= 500; n++) {
      const next = entry(n % 2 === 0 ? 'a' : 'b', n, 'spend', seen);
      folded = addOpen(folded, next);
      seen = { ...next.at };
      expect(folded.open.length).toBeLessThanOrEqual(MOST_OPEN);
      if (n === MOST_OPEN) expect(whyRecount(folded, 0)).toBeNull();
    }
    expect(whyRecount(folded, 0)).toBe('long-unweighed');
    expect(whyRecount(addOpen(folded, entry('c', 1, 'recount', { ...seen, a: 3 })), 0)).not.toBeNull();
    expect(whyRecount(addOpen(folded, entry('c', 1, 'recount', seen)), 0)).toBeNull();
  });
});
