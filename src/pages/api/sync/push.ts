import type { APIRoute } from 'astro';
import { v7 as randomId } from 'uuid';
import { LARGEST_PUSH_BYTES, pushRequest } from '#contract/push.ts';
import { database } from '#server/db/connection.ts';
import { HttpProblem } from '#server/http/http-problem.ts';
import { countOutcomes } from '#server/http/observe.ts';
import { requireFewPushes } from '#server/http/push-limits.ts';
import { readBody } from '#server/http/read-body.ts';
import { applyPush } from '#server/sync/apply-push.ts';

export const POST: APIRoute = async ({ locals, request }) => {
  const { station } = locals;
  if (station === undefined) throw new HttpProblem(401, 'no-station', 'No station', 'Sign in on this device first.');
  await requireFewPushes(station);
  const push = await readBody(request, pushRequest, LARGEST_PUSH_BYTES + 1024);
  const answer = await applyPush(database(), station, push, { now: () => new Date(), randomId });
  countOutcomes(answer.results);
  return Response.json(answer);
};
