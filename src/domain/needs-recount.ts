import { type Seen, covers, joinSeen, sizeOf } from './seen.ts';

/**
 * What an entry did to a tub's content. `spend`: took some, unweighed. `spend-weighed`: took some, and what is left was
 * weighed (a return, a scraped tub). `recount` and `discard` say what is in it.
 */
export type ContentKind = 'spend' | 'spend-weighed' | 'recount' | 'discard';

/** `at` is what the entry knew, itself included. */
export interface OpenEntry {
  installId: string;
  kind: ContentKind;
  at: Seen;
}

/**
 * The entries on a tub's content that no weighing has seen, and with them the weighings that no later one has seen.
 * Where they were too many only `beyond` is kept: what a weighing must have seen to settle them.
 */
export interface OpenEntries {
  open: readonly OpenEntry[];
  beyond?: Seen | undefined;
}

export type RecountReason =
  'both-spent' | 'spent-and-discarded' | 'spent-across-recount' | 'weighed-twice' | 'long-unweighed' | 'below-nothing';

/** Common practice, no source: so many turns between stations without a weighing, and nobody trusts the figure. */
export const MOST_OPEN = 40;

const weighs = ({ kind }: OpenEntry) => kind !== 'spend';
const concurrent = (one: OpenEntry, other: OpenEntry) => !covers(one.at, other.at) && !covers(other.at, one.at);

/**
 * The open entries with one more. They are a function of the set of entries: what a weighing has seen is dropped whenever
 * either of them arrives.
 */
export function addOpen({ open, beyond }: OpenEntries, entry: OpenEntry): OpenEntries {
  if (open.some((known) => weighs(known) && covers(known.at, entry.at))) return { open, beyond };
  const settles = (at: Seen) => weighs(entry) && covers(entry.at, at);
  const left = [...open.filter((known) => !settles(known.at)), entry];
  const kept = left.filter((known) => !left.some((other) => other !== known && standsFor(other, known)));
  const before = beyond !== undefined && settles(beyond) ? undefined : beyond;
  if (kept.length > MOST_OPEN) return { open: [], beyond: kept.map(({ at }) => at).reduce(joinSeen, before ?? {}) };
  return { open: kept.sort(byKnowledge), beyond: before };
}

/** Of spends in a row by one install that learned nothing of others in between, the last one tells all that matters. */
function standsFor(later: OpenEntry, earlier: OpenEntry): boolean {
  if (later.kind !== 'spend' || earlier.kind !== 'spend' || later.installId !== earlier.installId) return false;
  const own = later.installId;
  const others = (at: Seen) => sizeOf(at) - (at[own] ?? 0);
  return (
    (later.at[own] ?? 0) > (earlier.at[own] ?? 0) &&
    covers(later.at, earlier.at) &&
    others(later.at) === others(earlier.at)
  );
}

function byKnowledge(one: OpenEntry, other: OpenEntry): number {
  return sizeOf(one.at) - sizeOf(other.at) || (one.installId < other.installId ? -1 : 1);
}

/**
 * Why a tub must be weighed again, or null: two entries on its content of which neither had seen the other, and that no
 * weighing has seen both of; or less than nothing in the books. A tub that was only discarded is gone: there is nothing
 * to weigh.
 */
export function whyRecount({ open, beyond }: OpenEntries, balanceMg: number): RecountReason | null {
  if (open.length > 0 && beyond === undefined && open.every(({ kind }) => kind === 'discard')) return null;
  const found = new Set(pairsOf(open).map(reasonOf));
  const reason = WORST_FIRST.find((entry) => found.has(entry));
  if (reason !== undefined) return reason;
  if (beyond !== undefined) return 'long-unweighed';
  return balanceMg < 0 ? 'below-nothing' : null;
}

const WORST_FIRST: readonly RecountReason[] = [
  'both-spent',
  'spent-and-discarded',
  'spent-across-recount',
  'weighed-twice',
];

/** Sorted by what they knew, entries are a chain when each covers the one before. */
function pairsOf(open: readonly OpenEntry[]): [OpenEntry, OpenEntry][] {
  if (open.every((entry, n) => n === 0 || covers(entry.at, (open[n - 1] as OpenEntry).at))) return [];
  return open.flatMap((one, n) =>
    open.slice(n + 1).flatMap((other): [OpenEntry, OpenEntry][] => (concurrent(one, other) ? [[one, other]] : [])),
  );
}

function reasonOf([one, other]: [OpenEntry, OpenEntry]): RecountReason {
  const spent = [one, other].filter(({ kind }) => kind === 'spend' || kind === 'spend-weighed').length;
  if (spent === 2) return 'both-spent';
  if (spent === 0) return 'weighed-twice';
  return one.kind === 'discard' || other.kind === 'discard' ? 'spent-and-discarded' : 'spent-across-recount';
}
