import { StartError } from './say.mjs';

const controller = new AbortController();

/** Aborted by the first Ctrl-C or SIGTERM; steps that run child processes end them on it. */
export const stopping = controller.signal;

/** Without this a signal would end the command at once and leave its cluster running. */
export function listenForStop() {
  for (const name of /** @type {const} */ (['SIGINT', 'SIGTERM', 'SIGHUP'])) process.on(name, () => controller.abort());
}

export function requireNotStopped() {
  if (stopping.aborted) throw new StartError('Stopped before it was ready.');
}
