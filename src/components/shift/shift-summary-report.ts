import type { OperationBody } from '#contract/operation-bodies.ts';
import type { ShiftSpan, ShiftSummary } from '#domain/shift-summary.ts';
import type { QueuedOperation } from '#offline/outbox.ts';

export type ShiftReport = Extract<OperationBody, { type: 'shift-reported' }>;

/** What is shown, as the entry that hands it in. @param note as typed */
export function reportOf(span: ShiftSpan, summary: ShiftSummary, note: string): ShiftReport {
  const { batches, mixedMg, reusedMg, discards, discardedMg, open } = summary;
  return {
    type: 'shift-reported',
    body: {
      from: new Date(span.fromMs).toISOString(),
      to: new Date(span.toMs).toISOString(),
      batches,
      mixedMg,
      reusedMg,
      discards,
      discardedMg,
      openPoints: {
        waiting: open.waiting,
        refused: open.refused,
        recounts: open.recounts.length,
        unreleased: open.unreleased.length,
        atPress: open.atPress.length,
      },
      note: note.trim() || null,
    },
  };
}

/** True when this entry says the same already, of a time that began no earlier; what waits and the end of a running shift go on by themselves. */
export function isHandedIn({ operation, status }: QueuedOperation, { body }: ShiftReport): boolean {
  if (operation.type !== 'shift-reported' || status === 'rejected' || status === 'dropped') return false;
  const told = operation.body;
  const same = (['batches', 'mixedMg', 'reusedMg', 'discards', 'discardedMg', 'note'] as const).every(
    (figure) => told[figure] === body[figure],
  );
  const points = (['refused', 'recounts', 'unreleased', 'atPress'] as const).every(
    (point) => told.openPoints[point] === body.openPoints[point],
  );
  return same && points && sameTime(told, body);
}

/** Both of one beginning; or of a length that moves on, as the last twelve hours do, within an hour. */
function sameTime(told: ShiftReport['body'], now: ShiftReport['body']): boolean {
  const between = (one: string, other: string) => Math.abs(Date.parse(one) - Date.parse(other));
  return told.from === now.from || (between(told.from, now.from) < 3_600_000 && between(told.to, now.to) < 3_600_000);
}
