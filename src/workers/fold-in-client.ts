import { type FoldInPlan, type FoldInProblem, verifyPlan } from '#domain/fold-in.ts';
import type { FromWorker, ToWorker } from './fold-in-messages.ts';

/** What the client uses of a Worker. */
export type Solver = Pick<Worker, 'postMessage' | 'addEventListener' | 'removeEventListener'>;

let worker: Solver | undefined;
let lastId = 0;

/** A worker answered with a plan that does not hold in exact arithmetic; it is never shown. */
export class UnverifiedPlanError extends Error {
  override name = 'UnverifiedPlanError';
}

/** Solves in the worker; the plan has been verified exactly on this side. @throws UnverifiedPlanError, Error */
export function solveFoldIn(
  problem: FoldInProblem,
  onProgress?: (plan: FoldInPlan) => void,
  signal?: AbortSignal,
): Promise<FoldInPlan> {
  worker ??= new Worker(new URL('./solve-fold-in.ts', import.meta.url), { type: 'module' });
  return askSolver(worker, problem, onProgress, signal);
}

/** One question to a solver; it ends with a verified plan, a refusal, a broken worker or the caller's cancel. */
export function askSolver(
  solver: Solver,
  problem: FoldInProblem,
  onProgress?: (plan: FoldInPlan) => void,
  signal?: AbortSignal,
): Promise<FoldInPlan> {
  const id = ++lastId;
  const send = (message: ToWorker) => solver.postMessage(message);
  return new Promise((resolve, reject) => {
    if (signal?.aborted) return reject(new Error('Cancelled.'));
    const end = () => {
      solver.removeEventListener('message', listen);
      solver.removeEventListener('error', broken);
      signal?.removeEventListener('abort', abort);
    };
    const abort = () => {
      end();
      send({ cancel: id });
      reject(new Error('Cancelled.'));
    };
    const broken = () => {
      end();
      // A worker that could not start is made anew with the next question.
      if (solver === worker) worker = undefined;
      reject(new Error('The search could not start. Try again.'));
    };
    const listen = (event: MessageEvent<FromWorker>) => {
      const message = event.data;
      if (message.id !== id) return;
      if (message.kind === 'progress') return onProgress?.(message.plan);
      end();
      if (message.kind === 'failed') return reject(new Error(message.message));
      const verdict = verifyPlan(problem, message.plan);
      if (verdict.ok) resolve(message.plan);
      else reject(new UnverifiedPlanError(verdict.reasons.join(' ')));
    };
    signal?.addEventListener('abort', abort);
    solver.addEventListener('message', listen);
    solver.addEventListener('error', broken);
    send({ id, problem });
  });
}
