import { type Milligrams, milligrams } from './mass.ts';

/** From `fromMs`, included, to `toMs`, excluded; in ms since 1970. */
export interface ShiftSpan {
  fromMs: number;
  toMs: number;
}

export interface ShiftBatch {
  id: string;
  mixedAtMs: number;
  actualMg: Milligrams;
  /** Of `actualMg`, what came out of leftovers. */
  reusedMg: Milligrams;
  released: boolean;
}

export interface ShiftTub {
  id: string;
  batchId: string | null;
  state: 'shelf' | 'at-press' | 'quarantine' | 'empty' | 'discarded';
  needsRecount: boolean;
}

/** `shownMg`: what the books still held of the tub, below zero where they were wrong. */
export interface Discard {
  atMs: number;
  shownMg: number;
}

/** What a station shows of its shop: rows and queue. */
export interface ShiftFacts {
  batches: readonly ShiftBatch[];
  tubs: readonly ShiftTub[];
  discards: readonly Discard[];
  waiting: number;
  refused: number;
}

/** What somebody still has to do, whenever it began. */
export interface OpenPoints {
  /** Logs that are not sent. */
  waiting: number;
  /** Logs that the server did not accept. */
  refused: number;
  /** Tubs of which the books are in doubt, gone by one record and used by another among them. */
  recounts: string[];
  /** Batches that nobody released and that are still in a tub. */
  unreleased: string[];
  /** Tubs that are out at a press. */
  atPress: string[];
}

/** Masses in mg. */
export interface ShiftSummary {
  batches: number;
  mixedMg: Milligrams;
  reusedMg: Milligrams;
  discards: number;
  discardedMg: Milligrams;
  open: OpenPoints;
}

/** A span of time in which nothing can have happened, or more ink re-used than mixed. */
export class ShiftSummaryError extends Error {
  override name = 'ShiftSummaryError';
}

/** Sums what happened in the span and lists what is open now. @throws ShiftSummaryError @throws MassError */
export function summariseShift(span: ShiftSpan, facts: ShiftFacts): ShiftSummary {
  requireSpan(span);
  const batches = facts.batches.filter(({ mixedAtMs }) => isWithin(mixedAtMs, span));
  const discards = facts.discards.filter(({ atMs }) => isWithin(atMs, span));
  return {
    batches: batches.length,
    mixedMg: sum(batches.map(({ actualMg }) => actualMg)),
    reusedMg: sum(batches.map(reusedOf)),
    discards: discards.length,
    discardedMg: sum(discards.map(({ shownMg }) => Math.max(0, shownMg))),
    open: openPoints(facts),
  };
}

function openPoints({ batches, tubs, waiting, refused }: ShiftFacts): OpenPoints {
  const full = tubs.filter(({ state }) => state !== 'discarded' && state !== 'empty');
  const inTubs = new Set(full.map(({ batchId }) => batchId));
  return {
    waiting: requireCount(waiting),
    refused: requireCount(refused),
    recounts: tubs.filter(({ needsRecount }) => needsRecount).map(({ id }) => id),
    unreleased: batches.filter(({ id, released }) => !released && inTubs.has(id)).map(({ id }) => id),
    atPress: full.filter(({ state }) => state === 'at-press').map(({ id }) => id),
  };
}

function requireSpan({ fromMs, toMs }: ShiftSpan): void {
  if (!Number.isFinite(fromMs) || !Number.isFinite(toMs))
    throw new ShiftSummaryError('A shift has a beginning and an end. Enter both.');
  if (fromMs >= toMs) throw new ShiftSummaryError('The shift ends before it begins. Change one of the times.');
}

function isWithin(atMs: number, { fromMs, toMs }: ShiftSpan): boolean {
  if (!Number.isFinite(atMs)) throw new ShiftSummaryError(`An entry has no time (${atMs}). Load the shop again.`);
  return atMs >= fromMs && atMs < toMs;
}

function reusedOf({ id, actualMg, reusedMg }: ShiftBatch): Milligrams {
  if (reusedMg > actualMg)
    throw new ShiftSummaryError(`Batch ${id} holds more leftovers than ink. Load the shop again.`);
  return reusedMg;
}

function requireCount(count: number): number {
  if (!Number.isSafeInteger(count) || count < 0)
    throw new ShiftSummaryError(`Logs are counted from 0 up, not ${count}. Load the page again.`);
  return count;
}

/** Each mass is checked, and so is their sum. @throws MassError */
function sum(masses: readonly number[]): Milligrams {
  return milligrams(masses.reduce<number>((total, mass) => total + milligrams(mass), 0));
}
