import { type Problem, problem } from '#contract/problem.ts';

/** How one exchange with the server ended. */
export type SyncResult =
  | { kind: 'done' }
  | { kind: 'offline' }
  /** 401: nobody is signed in on the server's side. */
  | { kind: 'signed-out' }
  /** 403: this device may not send or fetch; the queue is kept. */
  | { kind: 'refused'; problem: string; revoked?: true }
  /** The server named operations that it takes later; fetching goes on. */
  | { kind: 'held'; problem: string }
  | { kind: 'failed'; problem: string; retryAfterMs: number | null };

export interface SyncDeps {
  fetch: typeof fetch;
  now: () => Date;
  randomId: () => string;
}

const PORTAL = 'This network asks for something first. Open a web page.';

/** What an answer other than 200 with JSON means; null when it may be read. */
export async function refusalOf(response: Response, now: Date): Promise<SyncResult | null> {
  const type = response.headers.get('content-type') ?? '';
  if (response.status === 200 && /^application\/json\b/.test(type)) return null;
  // Whoever answers with a page is not the server: what it denies was not asked of it.
  const isPage = /^(text\/html|application\/xhtml)/.test(type);
  if (isPage && response.status < 500) return { kind: 'failed', problem: PORTAL, retryAfterMs: null };
  if (response.status === 401) return { kind: 'signed-out' };
  if (response.status === 403) return refused(await problemOf(response));
  return { kind: 'failed', problem: await whyFailed(response), retryAfterMs: retryAfter(response, now) };
}

async function whyFailed(response: Response): Promise<string> {
  if (response.ok) return PORTAL;
  if (response.status === 429 || response.status >= 500) return 'The server is busy. It tries again.';
  return (await problemOf(response))?.detail ?? `The server answered ${response.status}. It tries again.`;
}

function refused(why: Problem | undefined): SyncResult {
  const told = {
    kind: 'refused' as const,
    problem: why?.detail ?? 'This device may not send any more. Ask a manager.',
  };
  return why?.code === 'station-revoked' ? { ...told, revoked: true } : told;
}

/** The server's own words; a page of somebody else has none. */
async function problemOf(response: Response): Promise<Problem | undefined> {
  const parsed = problem.safeParse(await response.json().catch(() => undefined));
  return parsed.success ? parsed.data : undefined;
}

/** Seconds or a date, RFC 9110 section 10.2.3. */
function retryAfter(response: Response, now: Date): number | null {
  const text = response.headers.get('retry-after');
  if (text === null) return null;
  const ms = /^\d+$/.test(text) ? Number(text) * 1000 : new Date(text).getTime() - now.getTime();
  return ms > 0 ? ms : null;
}
