import type { Operation } from '#contract/operation.ts';
import type { PushDraft } from './push-book.ts';

/** What the effects of one operation share. */
export interface ApplyContext {
  shopId: string;
  /** This push's place in the shop's order of changes. */
  seq: number;
  operation: Operation;
  /** Business time: the device's, corrected, not after it was received. */
  at: Date;
  draft: PushDraft;
}

/** It cannot be taken yet: its station has seen something that has not arrived here. The station keeps it and sends it again. */
export class NotYetError extends Error {
  override name = 'NotYetError';
}

/** Why an operation is not accepted, in a sentence for the technician. */
export class RejectedError extends Error {
  override name = 'RejectedError';
  readonly code: string;

  constructor(code: string, detail: string) {
    super(detail);
    this.code = code;
  }
}
