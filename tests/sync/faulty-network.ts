import type { Random } from '#scripts/seed/random.ts';

/** How often each fault happens, 0 to 1. */
export interface Faults {
  requestLost: number;
  responseLost: number;
  duplicate: number;
  refused: number;
  portal: number;
  cut: number;
}

export const EVERY_FAULT: Faults = {
  requestLost: 0.1,
  responseLost: 0.15,
  duplicate: 0.15,
  refused: 0.1,
  portal: 0.05,
  cut: 0.05,
};
export const NO_FAULT: Faults = { requestLost: 0, responseLost: 0, duplicate: 0, refused: 0, portal: 0, cut: 0 };

const lost = () => new TypeError('Failed to fetch');
const STATUSES = [401, 403, 426, 429, 503];

/** A network that loses, doubles, delays, cuts and lies; what reaches the server reaches the real handlers. */
export function faultyNetwork(server: typeof fetch, random: Random, faults: Faults): typeof fetch {
  const happens = (share: number) => random.next() < share;
  return async (input, init) => {
    if (happens(faults.requestLost)) throw lost();
    if (happens(faults.portal))
      return new Response('<h1>Welcome to our network</h1>', { headers: { 'content-type': 'text/html' } });
    if (happens(faults.refused)) {
      const status = random.pick(STATUSES);
      return new Response('', { status, headers: { 'retry-after': '1' } });
    }
    // Another request may be served in between: stations meet in any order.
    await new Promise((resolve) => setTimeout(resolve, random.int(0, 3)));
    if (happens(faults.duplicate)) await server(input, init);
    const response = await server(input, init);
    if (happens(faults.responseLost)) throw lost();
    if (!happens(faults.cut)) return response;
    const text = await response.text();
    return new Response(text.slice(0, random.int(0, text.length)), {
      status: response.status,
      headers: response.headers,
    });
  };
}
