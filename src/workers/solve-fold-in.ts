/// <reference lib="webworker" />
import { type FoldInProblem, searchFoldIn } from '#domain/fold-in.ts';
import type { FromWorker, ToWorker } from './fold-in-messages.ts';
import { searchUntil } from './search-until.ts';

declare const self: DedicatedWorkerGlobalScope;

const clock = {
  elapsed: () => performance.now(),
  deadlineMs: 1500,
  pause: () => new Promise<void>((resume) => setTimeout(resume, 0)),
};
const solving = new Set<number>();

self.addEventListener('message', (event: MessageEvent<ToWorker>) => {
  if ('cancel' in event.data) solving.delete(event.data.cancel);
  else void solve(event.data.id, event.data.problem);
});

async function solve(id: number, problem: FoldInProblem): Promise<void> {
  const answer = (message: FromWorker) => self.postMessage(message);
  solving.add(id);
  try {
    const plan = await searchUntil(
      searchFoldIn(problem),
      clock,
      () => !solving.has(id),
      (found) => answer({ id, kind: 'progress', ...found }),
    );
    if (plan !== undefined) answer({ id, kind: 'done', plan });
  } catch (error) {
    answer({ id, kind: 'failed', message: error instanceof Error ? error.message : 'The search stopped.' });
  } finally {
    solving.delete(id);
  }
}
