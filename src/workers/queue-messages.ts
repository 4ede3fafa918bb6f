import type { Milligrams } from '#domain/mass.ts';
import type { QueuePlans, QueueProblem } from '#domain/plan-queue.ts';
import type { Answer } from './ask-worker.ts';

/** `deadlineMs`: after so long the best plans so far are the answer. */
export interface QueueQuestion {
  queue: QueueProblem;
  deadlineMs: number;
}

/** How far a search is; the plans themselves are told once, at its end. */
export interface QueueProgress {
  reused: Milligrams;
  bound: Milligrams;
}

export type ToQueueWorker = { id: number; problem: QueueQuestion } | { cancel: number };
export type FromQueueWorker = Answer<QueueProgress, { found: QueuePlans }>;
