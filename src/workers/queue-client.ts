import { type QueuePlans, verifyQueue } from '#domain/plan-queue.ts';
import { type Solver, UnverifiedPlanError, askWorker } from './ask-worker.ts';
import type { QueueProgress, QueueQuestion } from './queue-messages.ts';

let worker: Solver | undefined;

/** Plans the queue in the worker; the plans have been verified exactly on this side. @throws UnverifiedPlanError, Error */
export function solveQueue(
  question: QueueQuestion,
  onProgress?: (progress: QueueProgress) => void,
  signal?: AbortSignal,
): Promise<QueuePlans> {
  worker ??= new Worker(new URL('./solve-queue.ts', import.meta.url), { type: 'module' });
  return askQueueSolver(worker, question, onProgress, signal);
}

/** One question to a solver; what it answers is verified. @throws UnverifiedPlanError, Error */
export async function askQueueSolver(
  solver: Solver,
  question: QueueQuestion,
  onProgress?: (progress: QueueProgress) => void,
  signal?: AbortSignal,
): Promise<QueuePlans> {
  const on = { progress: (progress: QueueProgress) => onProgress?.(progress), broken: () => forget(solver) };
  const { found } = await askWorker<QueueProgress, { found: QueuePlans }>(solver, question, on, signal);
  const verdict = verifyQueue(question.queue, found.plans);
  if (!verdict.ok) throw new UnverifiedPlanError(verdict.reasons.join(' '));
  return found;
}

/** A worker that could not start is made anew with the next question. */
function forget(solver: Solver): void {
  if (solver === worker) worker = undefined;
}
