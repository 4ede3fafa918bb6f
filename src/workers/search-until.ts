import { type FoldInPlan, type FoldInProblem, searchFoldIn } from '#domain/fold-in.ts';
import type { Milligrams } from '#domain/mass.ts';

export interface SearchClock {
  /** Milliseconds of a clock that never goes back. */
  elapsed: () => number;
  deadlineMs: number;
  /** Lets other messages in. */
  pause: () => Promise<void>;
}

/**
 * The search's plan, or at the deadline the best so far with its bound; undefined when cancelled. A stopped search
 * claims nothing that its bound does not prove. @throws FoldInError
 */
export async function searchUntil(
  problem: FoldInProblem,
  clock: SearchClock,
  isCancelled: () => boolean,
  onProgress: (found: { plan: FoldInPlan; bound: Milligrams }) => void,
): Promise<FoldInPlan | undefined> {
  const started = clock.elapsed();
  const search = searchFoldIn(problem);
  for (;;) {
    const step = search.next();
    if (step.done) return step.value;
    const { plan } = step.value;
    if (clock.elapsed() - started > clock.deadlineMs) return plan.status === 'best' ? plan : { ...plan, status: 'gap' };
    onProgress(step.value);
    await clock.pause();
    if (isCancelled()) return undefined;
  }
}
