import { describe, expect, test } from 'vitest';
import { describeSpan, isBeyondMemory, readTyped, spanOf, toTyped } from './shift-summary-span.ts';

const local = (text: string) => new Date(text).getTime();
const now = new Date('2026-12-01T14:32:10.500');

describe('the time of a shift', () => {
  test('today goes from midnight to the end of this minute, so that what was just logged is in it', () => {
    expect(spanOf('today', now)).toEqual({ fromMs: local('2026-12-01T00:00'), toMs: local('2026-12-01T14:33') });
  });

  test('yesterday is a whole day, over the end of a month too', () => {
    expect(spanOf('yesterday', now)).toEqual({ fromMs: local('2026-11-30T00:00'), toMs: local('2026-12-01T00:00') });
  });

  test('the last twelve hours reach into the day before', () => {
    const night = new Date('2026-12-01T05:59:59.999');
    expect(spanOf('twelve-hours', night)).toEqual({
      fromMs: local('2026-11-30T18:00'),
      toMs: local('2026-12-01T06:00'),
    });
  });

  test('what is shown in the two fields is read back as it was', () => {
    const span = { fromMs: local('2026-11-30T22:00'), toMs: local('2026-12-01T06:05') };
    expect(toTyped(span)).toEqual({ from: '2026-11-30T22:00', to: '2026-12-01T06:05' });
    expect(readTyped(toTyped(span))).toEqual(span);
  });

  test('an empty field is no time', () => {
    expect(readTyped({ from: '', to: '2026-12-01T06:05' }).fromMs).toBeNaN();
  });

  test('discards of more than fourteen days ago are not known here', () => {
    expect(isBeyondMemory({ fromMs: local('2026-11-17T14:33'), toMs: 0 }, now)).toBe(false);
    expect(isBeyondMemory({ fromMs: local('2026-11-17T14:31'), toMs: 0 }, now)).toBe(true);
  });
});

describe('a time in words', () => {
  const inWords = (from: string, to: string) => describeSpan({ fromMs: local(from), toMs: local(to) }, 'en-GB');

  test('a whole day is its date', () => {
    expect(inWords('2026-11-30T00:00', '2026-12-01T00:00')).toBe('Mon, 30 Nov 2026');
  });

  test('hours of one day name it once, a night names both', () => {
    expect(inWords('2026-12-01T00:00', '2026-12-01T14:33')).toBe('Tue, 1 Dec 2026, 00:00 to 14:33');
    expect(inWords('2026-11-30T22:00', '2026-12-01T06:00')).toBe('Mon, 30 Nov 2026, 22:00 to Tue, 1 Dec 2026, 06:00');
  });
});
