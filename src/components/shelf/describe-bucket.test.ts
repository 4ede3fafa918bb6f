import { describe, expect, it } from 'vitest';
import type { Row } from '#contract/rows.ts';
import { ageOf, isPastUseBy, largestShares, placeOf } from './describe-bucket.ts';

const tub = (change: Partial<Row<'buckets'>>) =>
  ({ state: 'shelf', locationId: 'b4', jobId: null, ...change }) as Row<'buckets'>;
const names = {
  locations: new Map([['b4', { id: 'b4', code: 'B4' }]]),
  jobs: new Map([['j', { number: 'J-118' } as Row<'jobs'>]]),
};

describe('a tub in words', () => {
  it('says where it is', () => {
    expect(placeOf(tub({}), names)).toBe('B4');
    expect(placeOf(tub({ locationId: null }), names)).toBe('No place yet');
    expect(placeOf(tub({ state: 'at-press', jobId: 'j' }), names)).toBe('At press for J-118');
    expect(placeOf(tub({ state: 'at-press' }), names)).toBe('At press');
    expect(placeOf(tub({ state: 'quarantine' }), names)).toBe('Quarantine, B4');
  });
  it('says how old it is', () => {
    const age = (filledAt: string) => ageOf(tub({ filledAt }), new Date('2026-11-17T12:00:00Z'));
    expect([age('2026-11-17T07:00:00Z'), age('2026-11-16T07:00:00Z'), age('2026-11-05T07:00:00Z')]).toEqual([
      'today',
      '1 day',
      '12 days',
    ]);
  });
  it('is past its use-by from the day after', () => {
    const past = (day: string) => isPastUseBy(tub({ useBy: '2026-11-17' }), new Date(`${day}T12:00:00Z`));
    expect([past('2026-11-17'), past('2026-11-18')]).toEqual([false, true]);
  });
  it('names the largest shares first and counts the others', () => {
    const composition = [10, 70, 20].map((ppb) => ({ componentId: `c${ppb}`, ppb }));
    expect(largestShares(tub({ composition }), 2)).toEqual({
      shares: [composition[1], composition[2]],
      others: 1,
    });
  });
});
