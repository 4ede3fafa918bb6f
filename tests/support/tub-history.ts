import fc from 'fast-check';
import type { ContentKind } from '#domain/needs-recount.ts';
import { type Seen, type SeenEntry, joinSeen, knowledgeOf } from '#domain/seen.ts';
import type { TubEffect } from '#domain/tub-trace.ts';
import { discardedTub, issuedTub, recountedTub, relocatedTub, returnedTub, takenFromTub } from '#domain/tub-effects.ts';

export interface HistoryEntry extends SeenEntry {
  effect: TubEffect;
}

type Act = { station: number; does: 'sync' | keyof typeof EFFECTS; mass: number };

const EFFECTS = {
  take: (mass: number) => takenFromTub({ actualMg: mass, empties: false }, 50),
  scrape: (mass: number) => takenFromTub({ actualMg: mass, empties: true }, 10),
  return: (mass: number) =>
    returnedTub({
      grossMg: 68 + mass,
      tareMg: 68,
      deltaMg: -mass,
      condition: mass % 3 === 0 ? 'dirty' : 'clean',
      locationId: `place ${mass}`,
      jobId: mass % 2 === 0 ? null : `job ${mass}`,
    }),
  recount: (mass: number) => recountedTub({ grossMg: 60 + mass, tareMg: 60, deltaMg: mass - 5 }),
  discard: (mass: number) => discardedTub({ displayedMg: mass }),
  issue: (mass: number) => issuedTub({ jobId: `job ${mass}` }),
  move: (mass: number) => relocatedTub({ locationId: `place ${mass}` }),
};

const act = fc.record({
  station: fc.nat({ max: 3 }),
  does: fc.constantFrom<Act['does'][]>('sync', 'sync', 'sync', ...(Object.keys(EFFECTS) as (keyof typeof EFFECTS)[])),
  mass: fc.nat({ max: 9 }),
});

/** What four stations record on one tub, each knowing its own entries and what it fetched when it last synced. */
export const histories = fc.array(act, { minLength: 1, maxLength: 36 }).map(recordAll);

function recordAll(acts: readonly Act[]): HistoryEntry[] {
  const entries: HistoryEntry[] = [];
  let server: Seen = {};
  const known: Seen[] = [{}, {}, {}, {}];
  for (const [n, { station, does, mass }] of acts.entries()) {
    const seen = known[station] as Seen;
    if (does === 'sync') {
      server = joinSeen(server, ownOf(seen, station));
      known[station] = joinSeen(seen, server);
      continue;
    }
    const entry = { installId: `station ${station}`, deviceSeq: n + 1, seen };
    // Ids that tell nothing of the order.
    entries.push({ ...entry, opId: `entry ${(n * 7919) % 101}`, effect: EFFECTS[does](mass) });
    known[station] = knowledgeOf(entry);
  }
  return entries;
}

function ownOf(seen: Seen, station: number): Seen {
  const own = seen[`station ${station}`];
  return own === undefined ? {} : { [`station ${station}`]: own };
}

/** Entries that change what is in the tub, with what they do to it. */
export function contentOf(entries: readonly HistoryEntry[]) {
  return entries.flatMap(({ installId, deviceSeq, seen, effect }) =>
    effect.content === null
      ? []
      : [{ installId, kind: effect.content satisfies ContentKind, at: knowledgeOf({ installId, deviceSeq, seen }) }],
  );
}
