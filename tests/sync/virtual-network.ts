import { type Random, seededRandom } from '#scripts/seed/random.ts';
import type { VirtualTime } from './virtual-time.ts';

/** How often each fault happens to a request, 0 to 1. */
export interface Faults {
  requestLost: number;
  responseLost: number;
  duplicate: number;
  /** Comes seconds later, after others that set out after it. */
  reorder: number;
  refused: number;
  portal: number;
  cut: number;
  stalled: number;
  /** The database goes away between the last statement and the commit. */
  killedBeforeCommit: number;
}

export const EVERY_FAULT: Faults = {
  requestLost: 0.08,
  responseLost: 0.15,
  duplicate: 0.15,
  reorder: 0.2,
  refused: 0.08,
  portal: 0.05,
  cut: 0.05,
  stalled: 0.03,
  killedBeforeCommit: 0.05,
};
export const NO_FAULT = Object.fromEntries(Object.keys(EVERY_FAULT).map((name) => [name, 0])) as unknown as Faults;

/** What happened to the requests of a shift, by the name of the fault. */
export type FaultCount = Record<keyof Faults, number>;
export const noneYet = (): FaultCount => ({ ...NO_FAULT });

export interface Network {
  time: VirtualTime;
  random: Random;
  /** Of this station, for the order of what happens at the same time. */
  name: string;
  faults: () => Faults;
  isOnline: () => boolean;
  count: FaultCount;
}

/** A request as it reaches the server. */
export interface Arrived {
  input: Parameters<typeof fetch>[0];
  init: RequestInit | undefined;
  /** The database is to go away before the commit. */
  doomed: boolean;
  /** Its own, so that what happens to it does not depend on others. */
  random: Random;
  order: string;
}

/** What the real handlers answer. */
export type Handlers = (request: Arrived) => Promise<Response>;

const STATUSES = [401, 403, 426, 429, 503] as const;
/** As long as the station waits before it gives an exchange up. */
const STALLED_MS = 60_000;

/** A network that loses, doubles, delays, cuts and lies; what reaches the server reaches the real handlers. */
export function virtualFetch(handlers: Handlers, network: Network): typeof fetch {
  const { time, random, name, count } = network;
  let sent = 0;
  return async (input, init) => {
    const order = `${name}:${++sent}`;
    const happens = (fault: keyof Faults) => {
      const does = random.next() < network.faults()[fault];
      if (does) count[fault] += 1;
      return does;
    };
    await time.sleep(random.int(2, 120), `${order}:out`);
    if (!network.isOnline() || happens('requestLost')) throw lost();
    if (happens('portal')) return portal();
    if (happens('refused')) return refusal(random.pick(STATUSES));
    const arrived = (end: string, doomed: boolean): Arrived => {
      return { input, init, doomed, random: seededRandom(random.int(0, 2 ** 31)), order: `${order}:${end}` };
    };
    if (happens('duplicate')) {
      const again = arrived('again', false);
      time.after(random.int(0, 9_000), again.order, async () => {
        await handlers(again);
      });
    }
    if (happens('reorder')) await time.sleep(random.int(500, 8_000), `${order}:late`);
    const response = await handlers(arrived('in', happens('killedBeforeCommit')));
    await time.sleep(random.int(2, 120), `${order}:back`);
    if (!network.isOnline() || happens('responseLost')) throw lost();
    if (happens('stalled')) return stalledIn(response, () => time.sleep(STALLED_MS, `${order}:stalled`));
    return happens('cut') ? cutIn(response, random) : response;
  };
}

const lost = () => new TypeError('Failed to fetch');
const portal = () => new Response('<h1>Welcome to our network</h1>', { headers: { 'content-type': 'text/html' } });
const refusal = (status: number) => new Response('', { status, headers: { 'retry-after': '3' } });

async function cutIn(response: Response, random: Random): Promise<Response> {
  const text = await response.text();
  const { status, headers } = response;
  return new Response(text.slice(0, random.int(0, text.length - 1)), { status, headers });
}

/** Headers and half of the body come; then nothing, until the station gives up. */
async function stalledIn(response: Response, wait: () => Promise<void>): Promise<Response> {
  const text = await response.text();
  const { status, headers } = response;
  const body = new ReadableStream<Uint8Array>(
    {
      start: (stream) => stream.enqueue(new TextEncoder().encode(text.slice(0, text.length >> 1))),
      pull: async (stream) => {
        await wait();
        stream.error(new DOMException('The operation timed out.', 'TimeoutError'));
      },
    },
    { highWaterMark: 0 },
  );
  return new Response(body, { status, headers });
}
