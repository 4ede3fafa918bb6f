import { describe, expect, test } from 'vitest';
import type { ShiftSummary } from '#domain/shift-summary.ts';
import type { Milligrams } from '#domain/mass.ts';
import type { QueuedOperation } from '#offline/outbox.ts';
import { shiftReported } from '#contract/shift-report.ts';
import { isHandedIn, reportOf } from './shift-summary-report.ts';

const mg = (value: number) => value as Milligrams;
const span = { fromMs: Date.UTC(2026, 11, 1), toMs: Date.UTC(2026, 11, 1, 14, 33) };
const summary: ShiftSummary = {
  batches: 3,
  mixedMg: mg(2_550_000),
  reusedMg: mg(400_000),
  discards: 1,
  discardedMg: mg(90_000),
  open: { waiting: 2, refused: 0, recounts: ['a'], unreleased: [], atPress: ['b', 'c'] },
};
const kept = (note = '', given: Partial<QueuedOperation> = {}) =>
  ({ status: 'waiting', operation: reportOf(span, summary, note), ...given }) as QueuedOperation;

test('a summary becomes an entry that the contract takes: its counts, its kilograms, an empty note as none', () => {
  const { body } = reportOf(span, summary, '  ');
  expect(shiftReported.parse(body)).toEqual({
    from: '2026-12-01T00:00:00.000Z',
    to: '2026-12-01T14:33:00.000Z',
    batches: 3,
    mixedMg: 2_550_000,
    reusedMg: 400_000,
    discards: 1,
    discardedMg: 90_000,
    openPoints: { waiting: 2, refused: 0, recounts: 1, unreleased: 0, atPress: 2 },
    note: null,
  });
});

describe('a summary that was handed in already', () => {
  const later = { ...span, toMs: span.toMs + 5 * 60_000 };

  test('is not handed in again while only the clock went on and more was sent', () => {
    const open = { ...summary.open, waiting: 0 };
    expect(isHandedIn(kept(), reportOf(later, { ...summary, open }, ''))).toBe(true);
  });

  test('the last twelve hours move on by themselves', () => {
    const moved = { fromMs: span.fromMs + 60_000, toMs: span.toMs + 60_000 };
    expect(isHandedIn(kept(), reportOf(moved, summary, ''))).toBe(true);
  });

  test.each([
    ['one more batch', reportOf(later, { ...summary, batches: 4 }, '')],
    ['one more tub at a press', reportOf(later, { ...summary, open: { ...summary.open, atPress: ['b'] } }, '')],
    ['a note', reportOf(later, summary, 'Base white runs out.')],
    ['another day', reportOf({ fromMs: span.fromMs - 86_400_000, toMs: span.fromMs }, summary, '')],
  ])('may be handed in again with %s', (_, report) => {
    expect(isHandedIn(kept(), report)).toBe(false);
  });

  test('does not count when it was refused or dropped', () => {
    const report = reportOf(span, summary, '');
    expect(isHandedIn(kept('', { status: 'rejected' }), report)).toBe(false);
    expect(isHandedIn(kept('', { status: 'dropped' }), report)).toBe(false);
    expect(isHandedIn(kept('', { status: 'sent' }), report)).toBe(true);
  });
});
