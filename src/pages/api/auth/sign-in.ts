import type { APIRoute } from 'astro';
import { v7 as randomId } from 'uuid';
import { signInRequest } from '#contract/sign-in.ts';
import { setCookie } from '#server/auth/cookies.ts';
import { signIn } from '#server/auth/sign-in.ts';
import { database } from '#server/db/connection.ts';
import { readBody } from '#server/http/read-body.ts';

const LARGEST_BODY = 16 * 1024;

export const POST: APIRoute = async ({ request, locals, cookies, url }) => {
  const body = await readBody(request, signInRequest, LARGEST_BODY);
  const admitted = await signIn(database(), body, locals.station, { now: () => new Date(), randomId });
  setCookie(cookies, 'session', url, admitted.sessionCookie);
  if (admitted.stationCookie !== undefined) setCookie(cookies, 'station', url, admitted.stationCookie);
  return Response.json(admitted.response);
};
