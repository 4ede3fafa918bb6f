import type { OperationBody } from '#contract/operation-bodies.ts';
import { type ApplyContext, RejectedError } from './apply-context.ts';

type ShiftReported = Extract<OperationBody, { type: 'shift-reported' }>['body'];

/** The log keeps the report as it is; the mail to the managers is a job that becomes due with this transaction. */
export function applyShiftReported({ shopId, operation, draft }: ApplyContext, { from, to }: ShiftReported): void {
  if (Date.parse(from) >= Date.parse(to)) {
    throw new RejectedError('span', 'The shift ends before it begins. Send the summary again with other times.');
  }
  draft.writes.jobs.push({ queue: 'shift-report', payload: { shopId, opId: operation.opId } });
}
