import { type FoldInPlan, type FoldInProblem, verifyPlan } from '#domain/fold-in.ts';
import { type Solver, UnverifiedPlanError, askWorker } from './ask-worker.ts';

export { type Solver, UnverifiedPlanError };

let worker: Solver | undefined;

/** Solves in the worker; the plan has been verified exactly on this side. @throws UnverifiedPlanError, Error */
export function solveFoldIn(
  problem: FoldInProblem,
  onProgress?: (plan: FoldInPlan) => void,
  signal?: AbortSignal,
): Promise<FoldInPlan> {
  worker ??= new Worker(new URL('./solve-fold-in.ts', import.meta.url), { type: 'module' });
  return askSolver(worker, problem, onProgress, signal);
}

/** One question to a solver; what it answers is verified. @throws UnverifiedPlanError, Error */
export async function askSolver(
  solver: Solver,
  problem: FoldInProblem,
  onProgress?: (plan: FoldInPlan) => void,
  signal?: AbortSignal,
): Promise<FoldInPlan> {
  const on = { progress: (found: { plan: FoldInPlan }) => onProgress?.(found.plan), broken: () => forget(solver) };
  const { plan } = await askWorker<{ plan: FoldInPlan }, { plan: FoldInPlan }>(solver, problem, on, signal);
  const verdict = verifyPlan(problem, plan);
  if (!verdict.ok) throw new UnverifiedPlanError(verdict.reasons.join(' '));
  return plan;
}

/** A worker that could not start is made anew with the next question. */
function forget(solver: Solver): void {
  if (solver === worker) worker = undefined;
}
