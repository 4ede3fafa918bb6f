import type { PullResponse } from '#contract/pull.ts';
import type { PushOutcome } from '#contract/push.ts';
import { v7 as uuidv7 } from 'uuid';
import { START } from './station.ts';

interface Call {
  path: string;
  query: URLSearchParams;
  body: { protocol: number; requestId: string; ops: { opId: string; deviceSeq: number }[] };
}

/** A fetch that answers by path; what was asked is kept in `calls`. An answer may be an error, as without a network. */
export function answering(answers: Readonly<Record<string, (call: Call, n: number) => Response | Error>>) {
  const calls: Call[] = [];
  const fetch: typeof globalThis.fetch = async (input, init) => {
    const url = new URL(String(input), 'http://shop.example');
    const body = (init?.body === undefined ? {} : JSON.parse(String(init.body))) as Call['body'];
    const call = { path: url.pathname, query: url.searchParams, body };
    const before = calls.filter((earlier) => earlier.path === call.path).length;
    calls.push(call);
    const answer = answers[url.pathname]?.(call, before) ?? new Response('', { status: 404 });
    if (answer instanceof Error) throw answer;
    return answer;
  };
  return { fetch, calls, deps: { fetch, now: () => START, randomId: uuidv7 } };
}

export const offline = () => new TypeError('Failed to fetch');

/** A push answer to this call, with one outcome an operation. */
export function pushAnswer(call: Call, outcomeOf: (opId: string, n: number) => PushOutcome): Response {
  const results = call.body.ops.map(({ opId }, n) => outcomeOf(opId, n));
  return Response.json({ protocol: 1, requestId: call.body.requestId, serverTime: START.toISOString(), results });
}

export const accepted =
  (changeSeq: number) =>
  (opId: string): PushOutcome => ({ opId, outcome: 'accepted', changeSeq });

/** A last page without rows, unless the test says more. */
export function pullAnswer(given: Partial<PullResponse> = {}): Response {
  const page: PullResponse = {
    protocol: 1,
    serverTime: START.toISOString(),
    cursor: 'cursor-1',
    seq: 1,
    more: false,
    remaining: null,
    changes: [],
    own: [],
    ...given,
  };
  return Response.json(page);
}
