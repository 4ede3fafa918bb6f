import type { APIRoute } from 'astro';
import { env } from '#server/env.ts';
import { HttpProblem } from '#server/http/http-problem.ts';
import { metrics } from '#server/http/observe.ts';

/** Prometheus' text format, for whoever holds METRICS_TOKEN; without one set there is nothing at this address. */
export const GET: APIRoute = async ({ request }) => {
  const token = env().METRICS_TOKEN;
  if (token === undefined || request.headers.get('authorization') !== `Bearer ${token}`)
    throw new HttpProblem(404, 'not-found', 'Not found', 'There is nothing at this address.');
  return new Response(await metrics.metrics(), { headers: { 'content-type': metrics.contentType } });
};
