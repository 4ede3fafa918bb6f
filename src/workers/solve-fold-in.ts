/// <reference lib="webworker" />
import { searchFoldIn } from '#domain/fold-in.ts';
import type { FromWorker, ToWorker } from './fold-in-messages.ts';

declare const self: DedicatedWorkerGlobalScope;

/** After this the best plan so far is taken, with its bound. */
const DEADLINE_MS = 1500;
const cancelled = new Set<number>();

self.addEventListener('message', (event: MessageEvent<ToWorker>) => {
  if ('cancel' in event.data) cancelled.add(event.data.cancel);
  else void solve(event.data.id, event.data.problem);
});

async function solve(id: number, problem: Parameters<typeof searchFoldIn>[0]): Promise<void> {
  const answer = (message: FromWorker) => self.postMessage(message);
  const started = performance.now();
  try {
    const search = searchFoldIn(problem);
    for (;;) {
      const step = search.next();
      if (step.done) return answer({ id, kind: 'done', plan: step.value });
      if (performance.now() - started > DEADLINE_MS) return answer({ id, kind: 'done', plan: step.value.plan });
      answer({ id, kind: 'progress', ...step.value });
      // Lets a cancel message in.
      await new Promise((resume) => setTimeout(resume, 0));
      if (cancelled.delete(id)) return;
    }
  } catch (error) {
    answer({ id, kind: 'failed', message: error instanceof Error ? error.message : 'The search stopped.' });
  }
}
