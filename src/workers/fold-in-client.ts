import { type FoldInPlan, type FoldInProblem, verifyPlan } from '#domain/fold-in.ts';
import type { FromWorker, ToWorker } from './fold-in-messages.ts';

let worker: Worker | undefined;
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
  const solver = worker;
  const id = ++lastId;
  const send = (message: ToWorker) => solver.postMessage(message);
  return new Promise((resolve, reject) => {
    const end = () => {
      solver.removeEventListener('message', listen);
      signal?.removeEventListener('abort', abort);
    };
    const abort = () => {
      send({ cancel: id });
      end();
      reject(new Error('Cancelled.'));
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
    if (signal?.aborted) return abort();
    signal?.addEventListener('abort', abort);
    solver.addEventListener('message', listen);
    send({ id, problem });
  });
}
