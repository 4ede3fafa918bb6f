import type { Operation } from '#contract/operation.ts';
import type { Row } from '#contract/rows.ts';
import type { Milligrams } from '#domain/mass.ts';
import type { Discard, ShiftFacts } from '#domain/shift-summary.ts';
import { findKey } from './outbox-keys.ts';
import type { QueuedOperation } from './outbox.ts';
import { correctedTime } from './overlay-bucket.ts';
import { readShown } from './shown.ts';
import type { Station } from './station.ts';

export interface ShownShift {
  facts: ShiftFacts;
  batches: ReadonlyMap<string, Row<'batches'>>;
  buckets: ReadonlyMap<string, Row<'buckets'>>;
  /** Summaries that were handed in here, in the order of recording. */
  reports: QueuedOperation[];
  /** This device's time by the clock of its last contact: entries carry the same. */
  now: Date;
}

/** All that a shift summary is reckoned from, as this device shows it now. */
export async function readShift(station: Station, deviceNow: Date = new Date()): Promise<ShownShift> {
  const { batches, buckets } = await readShown(station);
  const queued = await station.outbox.ops.orderBy('deviceSeq').toArray();
  const offsetMs = (await findKey(station.outbox, 'clock'))?.offsetMs ?? 0;
  const facts = {
    batches: [...batches.values()].map(asShiftBatch),
    tubs: [...buckets.values()],
    discards: queued.flatMap(asDiscard),
    waiting: queued.filter(({ status, operation }) => status === 'waiting' && !isReport(operation)).length,
    refused: queued.filter(({ status }) => status === 'rejected').length,
  };
  return {
    facts,
    batches,
    buckets,
    reports: queued.filter(({ operation }) => isReport(operation)),
    now: new Date(deviceNow.getTime() + offsetMs),
  };
}

/** A summary is no open point of the next one. */
function isReport({ type }: Operation): boolean {
  return type === 'shift-reported';
}

function asShiftBatch({ id, mixedAt, actualMg, reusedMg, state }: Row<'batches'>): ShiftFacts['batches'][number] {
  return {
    id,
    mixedAtMs: Date.parse(mixedAt),
    actualMg: actualMg as Milligrams,
    reusedMg: reusedMg as Milligrams,
    released: state === 'released',
  };
}

/** A row says that a tub is gone, not how much went with it: that is in the entry. */
function asDiscard({ operation, status }: QueuedOperation): Discard[] {
  if (operation.type !== 'bucket-discarded' || (status !== 'waiting' && status !== 'sent')) return [];
  return [{ atMs: Date.parse(correctedTime(operation)), shownMg: operation.body.displayedMg }];
}
