import { pushRequest } from '#contract/push.ts';
import { isPassing } from '#server/db/passing-error.ts';
import { HttpProblem, problemResponse } from '#server/http/http-problem.ts';
import { applyPush } from '#server/sync/apply-push.ts';
import { pullChanges } from '#server/sync/pull-changes.ts';
import { served } from './simulated-database.ts';
import { seededIds } from './simulated-ids.ts';
import type { Enrolled, SimulatedShop } from './simulated-shop.ts';
import type { Arrived, Handlers } from './virtual-network.ts';
import type { VirtualTime } from './virtual-time.ts';

/** The real handlers of one station, held up before each commit so that others come in between. */
export function simulatedServer(shop: SimulatedShop, enrolled: Enrolled, time: VirtualTime): Handlers {
  const handlers = serverAtRest(shop, enrolled, time);
  return (request) => {
    let commits = 0;
    const beforeCommit = async () => {
      await time.sleep(request.random.int(1, 400), `${request.order}:commit${++commits}`);
      if (request.doomed) throw Object.assign(new Error('terminating connection'), { code: '57P01' });
    };
    return served.run({ time, beforeCommit }, () => handlers(request));
  };
}

/** The same without anything between: for questions when the shift is over. */
export function serverAtRest(shop: SimulatedShop, { stationId }: Enrolled, time: VirtualTime): Handlers {
  return (request) =>
    answer(shop, stationId, request, time).catch((error: unknown) => {
      if (error instanceof HttpProblem) return problemResponse(error.problem, error.headers);
      if (isPassing(error)) return new Response('', { status: 503, headers: { 'retry-after': '2' } });
      throw error;
    });
}

async function answer(
  { db, shopId }: SimulatedShop,
  stationId: string,
  { input, init, random }: Arrived,
  time: VirtualTime,
): Promise<Response> {
  const url = new URL(String(input), 'http://shop.example');
  const now = () => new Date(time.now());
  const deps = { now, randomId: seededIds(random, time.now) };
  if (url.pathname === '/api/sync/push') {
    const push = pushRequest.parse(JSON.parse(String(init?.body)));
    return Response.json(await applyPush(db, { shopId, stationId }, push, deps));
  }
  if (url.pathname !== '/api/sync/pull') return new Response('', { status: 401 });
  const cursor = url.searchParams.get('cursor') ?? '';
  const installId = url.searchParams.get('install') ?? undefined;
  // Small pages: what belongs together comes apart.
  return Response.json(await pullChanges(db, shopId, { cursor, limit: random.int(3, 40), installId, now: now() }));
}
