import type { QueuePlans } from '#domain/plan-queue.ts';
import type { SearchClock } from './search-until.ts';

/** Other messages are let in after so long. */
const PAUSE_EVERY_MS = 40;

/** The search's plans, or at the deadline the best so far with their bound; undefined when cancelled. @throws what the search throws */
export async function searchQueueUntil(
  search: Generator<QueuePlans, QueuePlans>,
  clock: SearchClock,
  isCancelled: () => boolean,
  onProgress: (found: QueuePlans) => void,
): Promise<QueuePlans | undefined> {
  const started = clock.elapsed();
  let paused = started;
  for (;;) {
    const step = search.next();
    if (step.done) return step.value;
    const now = clock.elapsed();
    if (now - started > clock.deadlineMs) return step.value;
    if (now - paused < PAUSE_EVERY_MS) continue;
    onProgress(step.value);
    await clock.pause();
    if (isCancelled()) return undefined;
    paused = clock.elapsed();
  }
}
