import type { FoldInPlan } from '#domain/fold-in.ts';
import type { Milligrams } from '#domain/mass.ts';

interface Found {
  plan: FoldInPlan;
  bound: Milligrams;
}

export interface SearchClock {
  /** Milliseconds of a clock that never goes back. */
  elapsed: () => number;
  deadlineMs: number;
  /** Lets other messages in. */
  pause: () => Promise<void>;
}

/**
 * The search's plan, or at the deadline the best so far with its bound; undefined when cancelled. A search that was
 * stopped claims nothing that its bound does not prove. @throws what the search throws
 */
export async function searchUntil(
  search: Generator<Found, FoldInPlan>,
  clock: SearchClock,
  isCancelled: () => boolean,
  onProgress: (found: Found) => void,
): Promise<FoldInPlan | undefined> {
  const started = clock.elapsed();
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
