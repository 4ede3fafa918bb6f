import { type ContentKind, type OpenEntries, type RecountReason, addOpen, whyRecount } from './needs-recount.ts';
import { type Seen, type SeenEntry, knowledgeOf, sizeOf } from './seen.ts';
import type { Grade } from './compatibility.ts';

export type TubState = 'shelf' | 'at-press' | 'quarantine' | 'empty' | 'discarded';

/** What an entry says of a tub as it is now; of several entries the one that knew most is believed. */
export interface TubTold {
  state: TubState;
  locationId: string | null;
  jobId: string | null;
  tareMg: number;
}

/** An entry's place in the order of knowing; entries that do not know each other are told apart by their id. */
interface Rank {
  size: number;
  opId: string;
}

/** What must be kept of a tub's entries, so that it is the same tub in whatever order they arrive. */
export interface TubTrace extends OpenEntries {
  /** The entry that each field is from; `ink`: the last weighing that found ink in it. */
  told: Partial<Record<keyof TubTold | 'ink', Rank>>;
}

/** The part of a tub's row that entries change; masses in mg. */
export interface TubFields extends TubTold {
  balanceMg: number;
  grade: Grade;
  generation: number;
  needsRecount: boolean;
  seen: Seen;
  /** Missing in rows from before there were traces. */
  trace?: TubTrace | null | undefined;
}

/** What one entry does to a tub, whenever it arrives. */
export interface TubEffect {
  /** Fixed where it was recorded, so that balances add up in any order. */
  deltaMg: number;
  content: ContentKind | null;
  tells: Partial<TubTold>;
  /** It came back from a press: one generation more. */
  cameBack: boolean;
  /** There was ink in it, by weight. */
  foundInk: boolean;
}

/** Of a tub that was just filled. */
export const noTrace = () => ({ open: [], told: {} }) satisfies TubTrace;

/** A tub after one more entry: the same by any order of the same entries. Over-spend is flagged and never clipped. */
export function changeTub<T extends TubFields>(tub: T, entry: SeenEntry, effect: TubEffect): T {
  const at = knowledgeOf(entry);
  const rank = { size: sizeOf(at), opId: entry.opId };
  const before = traceOf(tub);
  const { tells, told } = believe(before.told, effect, rank);
  const balanceMg = tub.balanceMg + effect.deltaMg;
  const open =
    effect.content === null ? before : addOpen(before, { installId: entry.installId, kind: effect.content, at });
  const trace = { open: open.open, ...(open.beyond === undefined ? {} : { beyond: open.beyond }), told };
  const state = tells.state ?? tub.state;
  return {
    ...tub,
    ...tells,
    state: isGone(state) && outranks(told.ink, told.state) ? 'shelf' : state,
    balanceMg,
    grade: effect.cameBack && tub.grade === 'untouched' ? 'returned' : tub.grade,
    generation: tub.generation + (effect.cameBack ? 1 : 0),
    needsRecount: whyRecount(trace, balanceMg) !== null,
    seen: withEntry(tub.seen, entry),
    trace,
  };
}

/** Why a tub must be weighed again; null when it need not, or when its row is from before there were traces. */
export function recountReasonOf({ trace, balanceMg }: Pick<TubFields, 'trace' | 'balanceMg'>): RecountReason | null {
  return whyRecount(trace ?? noTrace(), balanceMg);
}

/** What is known of a tub with one more entry. */
export function withEntry(seen: Seen, { installId, deviceSeq }: Pick<SeenEntry, 'installId' | 'deviceSeq'>): Seen {
  return { ...seen, [installId]: Math.max(seen[installId] ?? 0, deviceSeq) };
}

/** Of a row from before there were traces all is taken for one spend, which a flag keeps open until it is weighed. */
export function traceOf({
  trace,
  seen,
  needsRecount,
  balanceMg,
}: Omit<TubFields, keyof TubTold | 'grade' | 'generation'>): TubTrace {
  if (trace !== undefined && trace !== null) return trace;
  if (Object.keys(seen).length === 0) return needsRecount && balanceMg >= 0 ? { ...noTrace(), beyond: {} } : noTrace();
  const past: TubTrace = { open: [{ installId: '', kind: 'spend', at: seen }], told: {} };
  return needsRecount && balanceMg >= 0 ? { ...past, beyond: seen } : past;
}

/** The fields that this entry tells and no entry of a higher rank has told. */
function believe(before: TubTrace['told'], { tells, foundInk }: TubEffect, rank: Rank) {
  const told = { ...before };
  const believed: Record<string, unknown> = {};
  for (const [field, value] of Object.entries(tells) as [keyof TubTold, unknown][]) {
    if (!outranks(rank, told[field])) continue;
    told[field] = rank;
    believed[field] = value;
  }
  if (foundInk && outranks(rank, told.ink)) told.ink = rank;
  return { tells: believed as Partial<TubTold>, told };
}

function outranks(one: Rank | undefined, other: Rank | undefined): boolean {
  if (one === undefined) return false;
  if (other === undefined || one.size > other.size) return true;
  return one.size === other.size && one.opId >= other.opId;
}

const isGone = (state: TubState) => state === 'empty' || state === 'discarded';
