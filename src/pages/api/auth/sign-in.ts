import type { APIRoute } from 'astro';
import { v7 as randomId } from 'uuid';
import { signInRequest } from '#contract/sign-in.ts';
import { setCookie } from '#server/auth/cookies.ts';
import { countFailure, forgetFailures, requireFewFailures } from '#server/auth/sign-in-limits.ts';
import { signIn } from '#server/auth/sign-in.ts';
import { database } from '#server/db/connection.ts';
import { HttpProblem } from '#server/http/http-problem.ts';
import { readBody } from '#server/http/read-body.ts';

const LARGEST_BODY = 16 * 1024;

export const POST: APIRoute = async ({ request, locals, cookies, url, clientAddress }) => {
  const body = await readBody(request, signInRequest, LARGEST_BODY);
  const attempt = { email: body.email, address: clientAddress };
  await requireFewFailures(attempt);
  const admitted = await signIn(database(), body, locals.station, { now: () => new Date(), randomId }).catch(
    async (error: unknown) => {
      if (error instanceof HttpProblem && error.problem.status === 401) await countFailure(attempt);
      throw error;
    },
  );
  await forgetFailures(attempt);
  setCookie(cookies, 'session', url, admitted.sessionCookie);
  if (admitted.stationCookie !== undefined) setCookie(cookies, 'station', url, admitted.stationCookie);
  return Response.json(admitted.response);
};
