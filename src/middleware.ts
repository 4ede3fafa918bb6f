import { defineMiddleware } from 'astro:middleware';
import { readCookie } from '#server/auth/cookies.ts';
import { routeAccess } from '#server/auth/route-access.ts';
import { findSession } from '#server/auth/sessions.ts';
import { findStation } from '#server/auth/stations.ts';
import { MOST_CONNECTIONS, database } from '#server/db/connection.ts';
import { isPassing } from '#server/db/passing-error.ts';
import { Gate, type Party, busy } from '#server/http/gate.ts';
import { HttpProblem, problemResponse } from '#server/http/http-problem.ts';
import { log } from '#server/http/log.ts';
import { observe } from '#server/http/observe.ts';

const SAFE = ['GET', 'HEAD', 'OPTIONS'];
/** Fewer than the pool has connections, so that nobody waits for one; a whole shop's stations may wait their turn. */
const gate = new Gate({ most: MOST_CONNECTIONS - 2, waiting: 500, patienceMs: 20_000 });
/** Tell how the server is while it is busy. */
const UNGATED = ['/api/health', '/api/ready', '/api/metrics'];

/** Origin, session, station and the route table before anything else; prerendered pages have none of it. */
export const onRequest = defineMiddleware(async (context, next) => {
  if (context.isPrerendered || !context.url.pathname.startsWith('/api/')) return next();
  const started = performance.now();
  const response = await answer(context, next).catch((error: unknown) => refuse(error, context.url.pathname));
  response.headers.set('Cache-Control', 'no-store');
  observe(context, response.status, performance.now() - started, gate.load);
  return response;
});

type Context = Parameters<Parameters<typeof defineMiddleware>[0]>[0];

function answer(context: Context, next: () => Promise<Response>): Promise<Response> {
  const work = async () => {
    await admitRequest(context);
    return next();
  };
  return UNGATED.includes(context.url.pathname) ? work() : gate.pass(partyOf(context), work);
}

/** Of one shop, so that no other waits behind its rush; the cookie names it and is not trusted for more than that. */
function partyOf({ url, cookies }: Context): Party {
  const shop = readCookie(cookies, 'station', url)?.split('.')[0] ?? 'no shop';
  return url.pathname === '/api/sync/push' ? { name: `push ${shop}`, most: 2 } : { name: shop, most: 5 };
}

async function admitRequest(context: Context): Promise<void> {
  const { request, url, cookies, locals } = context;
  if (!SAFE.includes(request.method) && request.headers.get('origin') !== url.origin) {
    throw new HttpProblem(403, 'foreign-origin', 'Foreign origin', 'This request comes from another site.');
  }
  const access = routeAccess[`${request.method === 'HEAD' ? 'GET' : request.method} ${url.pathname}`];
  if (access === undefined) throw new HttpProblem(404, 'not-found', 'Not found', 'There is nothing at this address.');
  const now = new Date();
  locals.station = await findStation(database(), readCookie(cookies, 'station', url), now);
  locals.person =
    access === 'session' ? await findSession(database(), readCookie(cookies, 'session', url), now) : undefined;
  if (access === 'session' && locals.person === undefined)
    throw new HttpProblem(401, 'signed-out', 'Signed out', 'Sign in first.');
  if (access === 'station' || access === 'handing-in') requireStation(locals.station, access);
}

function requireStation(station: App.Locals['station'], access: 'station' | 'handing-in'): void {
  if (station === undefined) throw new HttpProblem(401, 'no-station', 'No station', 'Sign in on this device first.');
  if (station.revoked && !(access === 'handing-in' && station.mayHandIn))
    throw new HttpProblem(403, 'station-revoked', 'Station revoked', 'This device was revoked. Ask a manager.');
}

function refuse(error: unknown, path: string): Response {
  if (error instanceof HttpProblem) return problemResponse(error.problem, error.headers);
  log.error(
    { path, error: error instanceof Error ? { name: error.name, message: error.message } : String(error) },
    'request failed',
  );
  if (isPassing(error)) {
    const { problem, headers } = busy();
    return problemResponse(problem, headers);
  }
  const problem = new HttpProblem(500, 'server-error', 'Server error', 'The server failed. It will be tried again.')
    .problem;
  return problemResponse(problem);
}
