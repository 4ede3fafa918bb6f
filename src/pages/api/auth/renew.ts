import type { APIRoute } from 'astro';
import { v7 as randomId } from 'uuid';
import { renewGrant } from '#server/auth/renew-grant.ts';
import { database } from '#server/db/connection.ts';
import { HttpProblem } from '#server/http/http-problem.ts';

/** A live session gives a fresh grant; the install comes from the query. */
export const POST: APIRoute = async ({ locals, url }) => {
  const { person } = locals;
  const installId = url.searchParams.get('install');
  if (person === undefined || installId === null)
    throw new HttpProblem(400, 'no-install', 'No install', 'Name the install.');
  return Response.json(
    await renewGrant(database(), person, locals.station, installId, { now: () => new Date(), randomId }),
  );
};
