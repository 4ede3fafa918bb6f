/** The error and what it wraps: Dexie hands on the browser's own as `inner`. */
function chainOf(error: unknown): { name: string; message: string }[] {
  const chain: { name: string; message: string }[] = [];
  for (let at = error; at instanceof Error && chain.length < 5; at = (at as { inner?: unknown }).inner) chain.push(at);
  return chain;
}

/** True when there was no room: told by a request, or when the transaction was to be committed. */
export function isDiskFull(error: unknown): boolean {
  return chainOf(error).some(({ name }) => name === 'QuotaExceededError');
}

const LOST_NAMES = ['UnknownError', 'InvalidStateError', 'DatabaseClosedError'];

/** True when the browser dropped its connection to the database: what was under way may or may not be written. */
export function isConnectionLost(error: unknown): boolean {
  const chain = chainOf(error);
  if (isDiskFull(error)) return false;
  return (
    chain.some(({ name, message }) => LOST_NAMES.includes(name) || /indexed database server lost/i.test(message)) ||
    // A connection that is closed by force aborts what runs on it, and nothing of ours aborts a transaction by name.
    chain.at(-1)?.name === 'AbortError'
  );
}
