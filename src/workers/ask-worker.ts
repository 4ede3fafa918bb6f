/** What a client uses of a Worker. */
export type Solver = Pick<Worker, 'postMessage' | 'addEventListener' | 'removeEventListener'>;

/** A worker answered with a plan that does not hold in exact arithmetic; it is never shown. */
export class UnverifiedPlanError extends Error {
  override name = 'UnverifiedPlanError';
}

/** What a worker sends about one question. */
export type Answer<Progress, Done> =
  | ({ id: number; kind: 'progress' } & Progress)
  | ({ id: number; kind: 'done' } & Done)
  | { id: number; kind: 'failed'; message: string };

interface Listener<Progress> {
  progress: (message: Progress) => void;
  /** The worker could not start. */
  broken: () => void;
}

let lastId = 0;

/** One question to a worker; it ends with what is done, a refusal, a broken worker or the caller's cancel. @throws Error */
export function askWorker<Progress, Done>(
  solver: Solver,
  problem: unknown,
  on: Listener<Progress>,
  signal?: AbortSignal,
): Promise<Done> {
  const id = ++lastId;
  return new Promise((resolve, reject) => {
    if (signal?.aborted) return reject(new Error('Cancelled.'));
    const end = () => {
      solver.removeEventListener('message', listen);
      solver.removeEventListener('error', broken);
      signal?.removeEventListener('abort', abort);
    };
    const abort = () => {
      end();
      solver.postMessage({ cancel: id });
      reject(new Error('Cancelled.'));
    };
    const broken = () => {
      end();
      on.broken();
      reject(new Error('The search could not start. Try again.'));
    };
    const listen = (event: MessageEvent<Answer<Progress, Done>>) => {
      const message = event.data;
      if (message.id !== id) return;
      if (message.kind === 'progress') return on.progress(message);
      end();
      if (message.kind === 'failed') reject(new Error(message.message));
      else resolve(message);
    };
    signal?.addEventListener('abort', abort);
    solver.addEventListener('message', listen);
    solver.addEventListener('error', broken);
    solver.postMessage({ id, problem });
  });
}
