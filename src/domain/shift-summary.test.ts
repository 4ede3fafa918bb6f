import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { type Milligrams, MassError } from './mass.ts';
import { type ShiftBatch, type ShiftFacts, type ShiftTub, ShiftSummaryError, summariseShift } from './shift-summary.ts';

const mg = (value: number) => value as Milligrams;
const span = { fromMs: 1000, toMs: 2000 };
const nothing: ShiftFacts = { batches: [], tubs: [], discards: [], waiting: 0, refused: 0 };
const batch = (given: Partial<ShiftBatch> = {}): ShiftBatch => ({
  id: 'b1',
  mixedAtMs: 1500,
  actualMg: mg(850_000),
  reusedMg: mg(0),
  released: true,
  ...given,
});
const tub = (given: Partial<ShiftTub> = {}): ShiftTub => ({
  id: 't1',
  batchId: 'b1',
  state: 'shelf',
  needsRecount: false,
  ...given,
});

describe('what happened in a shift', () => {
  test('nothing happened: all is 0', () => {
    expect(summariseShift(span, nothing)).toEqual({
      batches: 0,
      mixedMg: 0,
      reusedMg: 0,
      discards: 0,
      discardedMg: 0,
      open: { waiting: 0, refused: 0, recounts: [], unreleased: [], atPress: [] },
    });
  });

  test('batches of the span are counted and their kilograms and leftovers summed', () => {
    const batches = [batch(), batch({ id: 'b2', actualMg: mg(1_200_000), reusedMg: mg(310_500) })];
    const { mixedMg, reusedMg, ...summary } = summariseShift(span, { ...nothing, batches });
    expect({ batches: summary.batches, mixedMg, reusedMg }).toEqual({
      batches: 2,
      mixedMg: 2_050_000,
      reusedMg: 310_500,
    });
  });

  test('a batch at the beginning belongs to the shift, one at its end to the next', () => {
    const batches = [999, 1000, 1999, 2000].map((mixedAtMs) => batch({ mixedAtMs }));
    expect(summariseShift(span, { ...nothing, batches }).batches).toBe(2);
  });

  test('discards are counted; books that were below zero take nothing off', () => {
    const discards = [
      { atMs: 1200, shownMg: 240_000 },
      { atMs: 1300, shownMg: -15_000 },
      { atMs: 2500, shownMg: 90_000 },
    ];
    expect(summariseShift(span, { ...nothing, discards })).toMatchObject({ discards: 2, discardedMg: 240_000 });
  });

  test('two shifts that follow each other give the sum of both', () => {
    const times = fc.array(fc.record({ at: fc.integer({ min: 0, max: 99 }), mass: fc.nat(1_000_000) }));
    fc.assert(
      fc.property(times, fc.integer({ min: 1, max: 98 }), (made, cut) => {
        const batches = made.map(({ at, mass }, n) => batch({ id: `${n}`, mixedAtMs: at, actualMg: mg(mass) }));
        const facts = { ...nothing, batches };
        const mixed = (fromMs: number, toMs: number) => summariseShift({ fromMs, toMs }, facts).mixedMg;
        expect(mixed(0, cut) + mixed(cut, 100)).toBe(mixed(0, 100));
      }),
    );
  });
});

describe('what is still open', () => {
  const openOf = (facts: Partial<ShiftFacts>) => summariseShift(span, { ...nothing, ...facts }).open;

  test('what waits and what was refused is told as it is', () => {
    expect(openOf({ waiting: 12, refused: 1 })).toMatchObject({ waiting: 12, refused: 1 });
  });

  test('a tub at a press and one that disagrees with its scale are listed, whenever that began', () => {
    const tubs = [tub({ id: 'out', state: 'at-press' }), tub({ id: 'two', needsRecount: true }), tub({ id: 'fine' })];
    expect(openOf({ tubs })).toMatchObject({ atPress: ['out'], recounts: ['two'] });
  });

  test('a tub in doubt is listed also when it is empty or gone by one record', () => {
    const tubs = [
      tub({ id: 'empty', state: 'empty', needsRecount: true }),
      tub({ id: 'gone', state: 'discarded', needsRecount: true }),
    ];
    expect(openOf({ tubs }).recounts).toEqual(['empty', 'gone']);
  });

  test('an unreleased batch of another day is open while one of its tubs holds it', () => {
    const batches = [batch({ mixedAtMs: 1, released: false })];
    expect(openOf({ batches, tubs: [tub({ state: 'empty' }), tub()] }).unreleased).toEqual(['b1']);
    expect(openOf({ batches, tubs: [tub({ state: 'empty' }), tub({ state: 'discarded' })] }).unreleased).toEqual([]);
    expect(openOf({ batches: [batch()], tubs: [tub()] }).unreleased).toEqual([]);
  });
});

describe('what cannot be is said', () => {
  const summarise = (facts: Partial<ShiftFacts>) => () => summariseShift(span, { ...nothing, ...facts });

  test.each([
    { fromMs: Number.NaN, toMs: 1 },
    { fromMs: 1, toMs: Number.POSITIVE_INFINITY },
    { fromMs: 5, toMs: 5 },
    { fromMs: 6, toMs: 5 },
  ])('a span from $fromMs to $toMs', (wrong) => {
    expect(() => summariseShift(wrong, nothing)).toThrow(ShiftSummaryError);
  });

  test('an entry without a time', () => {
    expect(summarise({ batches: [batch({ mixedAtMs: Number.NaN })] })).toThrow(ShiftSummaryError);
    expect(summarise({ discards: [{ atMs: Number.NaN, shownMg: 1 }] })).toThrow(ShiftSummaryError);
  });

  test('more leftovers than ink, counts below zero', () => {
    expect(summarise({ batches: [batch({ reusedMg: mg(850_001) })] })).toThrow(ShiftSummaryError);
    expect(summarise({ waiting: -1 })).toThrow(ShiftSummaryError);
    expect(summarise({ refused: 0.5 })).toThrow(ShiftSummaryError);
  });

  test.each([-1, 0.5, Number.NaN, Number.POSITIVE_INFINITY])('a batch of %s mg', (actualMg) => {
    expect(summarise({ batches: [batch({ actualMg: mg(actualMg) })] })).toThrow(MassError);
  });

  test.each([Number.NaN, 0.5])('a discard of %s mg', (shownMg) => {
    expect(summarise({ discards: [{ atMs: 1500, shownMg }] })).toThrow(MassError);
  });
});
