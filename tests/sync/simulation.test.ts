import { v7 as uuidv7 } from 'uuid';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { brokenInvariants } from './invariants.ts';
import { simulate } from './simulate.ts';
import { type SimulatedShop, openSimulatedShop } from './simulated-shop.ts';

const SEEDS = Number(process.env['SIMULATION_SEEDS'] ?? 12);
const FIRST = Number(process.env['SIMULATION_FIRST'] ?? 1);
const settings = { stations: 5, operations: 40 };

let shop: SimulatedShop;
beforeAll(async () => {
  shop = await openSimulatedShop();
}, 120_000);
afterAll(async () => shop?.close());

test(
  `of ${SEEDS} shifts over a bad network with killed tabs nothing is lost and nothing doubled`,
  async () => {
    const total = { operations: 0, kills: 0 };
    const broken: string[] = [];
    for (let seed = FIRST; seed < FIRST + SEEDS; seed++) {
      const simulated = await simulate(shop, seed, settings);
      broken.push(...(await brokenInvariants(shop, simulated)).map((what) => `seed ${seed}: ${what}`));
      total.operations += simulated.saved.size;
      total.kills += simulated.kills;
    }
    const lost = broken.filter((what) => what.endsWith('is in 0 places')).length;
    const doubled = broken.filter((what) => what.includes(': once: ')).length - lost;
    console.log(
      `simulation: ${SEEDS} seeds, ${total.operations} operations, ${total.kills} kills, ` +
        `${lost} lost, ${doubled} doubled, ${broken.length} broken invariants`,
    );
    expect(broken).toEqual([]);
    expect(total.operations).toBeGreaterThan(SEEDS * 20);
    expect(total.kills).toBeGreaterThan(0);
  },
  Math.max(1_200_000, SEEDS * 60_000),
);

/** Pushes that came by. */
let every = 0;

/** Each of these breaks a rule that nothing else stands in for; within ten seeds the invariants must say so. */
const MUTATIONS: Record<string, (server: typeof fetch) => typeof fetch> = {
  'without dedupe': (server) => (input, init) => {
    if (typeof init?.body !== 'string') return server(input, init);
    const push = JSON.parse(init.body) as { ops: { opId: string; deviceSeq: number }[] };
    const ids = new Map<string, string>();
    const ops = push.ops.map((op) => {
      const opId = uuidv7();
      ids.set(opId, op.opId);
      return { ...op, opId };
    });
    // The server sees another number each time, the station its own.
    return server(input, { ...init, body: JSON.stringify({ ...push, ops }) }).then(async (response) => {
      const text = await response.text();
      return new Response(
        [...ids].reduce((all, [theirs, own]) => all.replaceAll(theirs, own), text),
        response,
      );
    });
  },
  'with a cursor that runs ahead of rows in the making': (server) => async (input, init) => {
    const response = await server(input, init);
    if (!String(input).includes('/pull') || response.status !== 200) return response;
    const page = (await response.json()) as { changes: unknown[] };
    return Response.json({ ...page, changes: page.changes.filter((_, n) => n % 3 !== 1) });
  },
  'with every answer of a push taken for an acceptance': (server) => async (input, init) => {
    if (!String(input).includes('/push')) return server(input, init);
    const push = JSON.parse(String(init?.body)) as { protocol: number; requestId: string; ops: { opId: string }[] };
    every += 1;
    if (every % 2 === 0) await server(input, init);
    const results = push.ops.map(({ opId }) => ({ opId, outcome: 'accepted', changeSeq: 1 }));
    return Response.json({
      protocol: push.protocol,
      requestId: push.requestId,
      serverTime: new Date().toISOString(),
      results,
    });
  },
};

describe('the simulation turns red', () => {
  test.each(Object.entries(MUTATIONS))(
    '%s',
    async (_, bend) => {
      for (let seed = 1; seed <= 10; seed++) {
        const simulated = await simulate(shop, 1000 + seed, { stations: 3, operations: 25, bend });
        if ((await brokenInvariants(shop, simulated)).length > 0) return expect(seed).toBeLessThanOrEqual(10);
      }
      expect.unreachable('Ten seeds, and no invariant was broken.');
    },
    600_000,
  );
});
