/** How one exchange with the server ended. */
export type SyncResult =
  | { kind: 'done' }
  | { kind: 'offline' }
  /** 401: nobody is signed in on the server's side. */
  | { kind: 'signed-out' }
  | { kind: 'failed'; problem: string; retryAfterMs: number | null };

export interface SyncDeps {
  fetch: typeof fetch;
  now: () => Date;
  randomId: () => string;
}

/** What a status other than 200 means; null when the answer may be read. */
export function refusalOf(response: Response): SyncResult | null {
  if (response.status === 401) return { kind: 'signed-out' };
  if (response.ok && /^application\/json\b/.test(response.headers.get('content-type') ?? '')) return null;
  if (response.ok)
    return { kind: 'failed', problem: 'This network asks for something first. Open a web page.', retryAfterMs: null };
  const seconds = Number(response.headers.get('retry-after'));
  return {
    kind: 'failed',
    problem:
      response.status === 403
        ? 'This device may not send any more. Ask a manager.'
        : 'The server is busy. It tries again.',
    retryAfterMs: Number.isFinite(seconds) && seconds > 0 ? seconds * 1000 : null,
  };
}
