/// <reference lib="webworker" />
import { searchQueue } from '#domain/plan-queue.ts';
import type { FromQueueWorker, QueueQuestion, ToQueueWorker } from './queue-messages.ts';
import { searchQueueUntil } from './search-queue-until.ts';

declare const self: DedicatedWorkerGlobalScope;

const solving = new Set<number>();

self.addEventListener('message', (event: MessageEvent<ToQueueWorker>) => {
  if ('cancel' in event.data) solving.delete(event.data.cancel);
  else void solve(event.data.id, event.data.problem);
});

async function solve(id: number, { queue, deadlineMs }: QueueQuestion): Promise<void> {
  const answer = (message: FromQueueWorker) => self.postMessage(message);
  const pause = () => new Promise<void>((resume) => setTimeout(resume, 0));
  solving.add(id);
  try {
    const found = await searchQueueUntil(
      searchQueue(queue),
      { elapsed: () => performance.now(), deadlineMs, pause },
      () => !solving.has(id),
      ({ reused, bound }) => answer({ id, kind: 'progress', reused, bound }),
    );
    if (found !== undefined) answer({ id, kind: 'done', found });
  } catch (error) {
    answer({ id, kind: 'failed', message: error instanceof Error ? error.message : 'The search stopped.' });
  } finally {
    solving.delete(id);
  }
}
