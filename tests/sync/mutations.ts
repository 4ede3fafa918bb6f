import type { PullResponse } from '#contract/pull.ts';
import type { PushResponse } from '#contract/push.ts';
import type { SimulatedDatabase } from './simulated-database.ts';
import { seededIds } from './simulated-ids.ts';
import type { Handlers } from './virtual-network.ts';

/** One rule of the sync, broken on purpose. */
export interface Mutation {
  bend?: (server: Handlers) => Handlers;
  breakDatabase?: (database: SimulatedDatabase, broken: boolean) => void;
}

/** Each breaks a rule that nothing else stands in for. */
export const mutations: Record<'dedupe' | 'the counter lock' | 'the overlay rule', Mutation> = {
  dedupe: { bend: withoutDedupe },
  'the counter lock': { breakDatabase: (database, broken) => database.releaseCounterAtOnce(broken) },
  'the overlay rule': { bend: alwaysPending },
};

/** The server sees another number of an operation each time it comes, the station its own. */
function withoutDedupe(server: Handlers): Handlers {
  return async (request) => {
    if (typeof request.init?.body !== 'string') return server(request);
    const nextId = seededIds(request.random, () => 0);
    const push = JSON.parse(request.init.body) as { ops: { opId: string }[] };
    const own = new Map<string, string>();
    const ops = push.ops.map((op) => {
      const opId = nextId();
      own.set(opId, op.opId);
      return { ...op, opId };
    });
    const response = await server({ ...request, init: { ...request.init, body: JSON.stringify({ ...push, ops }) } });
    const text = [...own].reduce((all, [theirs, mine]) => all.replaceAll(theirs, mine), await response.text());
    return new Response(text, response);
  };
}

/** Never told that the rows contain its entries, a station goes on folding them into the rows. */
function alwaysPending(server: Handlers): Handlers {
  return async (request) => {
    const response = await server(request);
    if (response.status !== 200) return response;
    const answer = (await response.json()) as PullResponse | PushResponse;
    if ('own' in answer) return Response.json({ ...answer, own: [] });
    const results = answer.results.map((result) => ('changeSeq' in result ? { ...result, changeSeq: NEVER } : result));
    return Response.json({ ...answer, results });
  };
}

/** A place in the order of changes that no pull reaches. */
const NEVER = 1_000_000_000;
