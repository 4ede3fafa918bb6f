import { defineMiddleware } from 'astro:middleware';
import { readCookie } from '#server/auth/cookies.ts';
import { routeAccess } from '#server/auth/route-access.ts';
import { findSession } from '#server/auth/sessions.ts';
import { findStation } from '#server/auth/stations.ts';
import { database } from '#server/db/connection.ts';
import { HttpProblem, problemResponse } from '#server/http/http-problem.ts';
import { log } from '#server/http/log.ts';

const SAFE = ['GET', 'HEAD', 'OPTIONS'];

/** Origin, session, station and the route table before anything else; prerendered pages have none of it. */
export const onRequest = defineMiddleware(async (context, next) => {
  if (context.isPrerendered || !context.url.pathname.startsWith('/api/')) return next();
  try {
    await admitRequest(context);
    const response = await next();
    response.headers.set('Cache-Control', 'no-store');
    return response;
  } catch (error) {
    return refuse(error, context.url.pathname);
  }
});

async function admitRequest(context: Parameters<Parameters<typeof defineMiddleware>[0]>[0]): Promise<void> {
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
  if (access === 'station') requireStation(locals.station);
}

function requireStation(station: App.Locals['station']): void {
  if (station === undefined) throw new HttpProblem(401, 'no-station', 'No station', 'Sign in on this device first.');
  if (station.revoked)
    throw new HttpProblem(403, 'station-revoked', 'Station revoked', 'This device was revoked. Ask a manager.');
}

function refuse(error: unknown, path: string): Response {
  const headers = { 'Cache-Control': 'no-store' };
  if (error instanceof HttpProblem) return problemResponse(error.problem, { ...headers, ...error.headers });
  log.error(
    { path, error: error instanceof Error ? { name: error.name, message: error.message } : String(error) },
    'request failed',
  );
  const problem = new HttpProblem(500, 'server-error', 'Server error', 'The server failed. It will be tried again.')
    .problem;
  return problemResponse(problem, headers);
}
