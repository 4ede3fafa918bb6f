import type { Row, TableName } from '#contract/rows.ts';
import type { QueuedOperation } from './outbox.ts';
import { type Shown, foldPending } from './overlay.ts';
import { isPendingAt } from './pending.ts';
import { reopening } from './reopening.ts';
import type { Station } from './station.ts';

/** True once the shop has been loaded whole onto this device. */
export async function isLoaded(station: Station): Promise<boolean> {
  const position = await reading(station, () => station.cache.meta.get('position'));
  return (position?.completeAt ?? null) !== null;
}

/** Every tub as it stands, pending operations folded in. */
export async function readShelf(station: Station): Promise<Row<'buckets'>[]> {
  return [...(await readShown(station)).buckets.values()];
}

export async function readBucketByCode(station: Station, code: string): Promise<Row<'buckets'> | undefined> {
  return (await readShelf(station)).find((bucket) => bucket.code === code);
}

export async function readBatches(station: Station): Promise<Row<'batches'>[]> {
  return [...(await readShown(station)).batches.values()];
}

export function readFormulas(station: Station): Promise<Row<'formulas'>[]> {
  return reading(station, () => station.cache.rows('formulas').toArray());
}

export function readFormula(station: Station, id: string): Promise<Row<'formulas'> | undefined> {
  return reading(station, () => station.cache.rows('formulas').get(id));
}

export function readRows<T extends TableName>(station: Station, table: T): Promise<Row<T>[]> {
  return reading(station, () => station.cache.rows(table).toArray());
}

export interface Queue {
  waiting: QueuedOperation[];
  rejected: QueuedOperation[];
  sentToday: QueuedOperation[];
}

/** The outbox in the order of recording. */
export async function readQueue(station: Station, now: Date = new Date()): Promise<Queue> {
  const all = await reading(station, () => station.outbox.ops.orderBy('deviceSeq').toArray());
  const today = now.toDateString();
  return {
    waiting: all.filter((entry) => entry.status === 'waiting'),
    rejected: all.filter((entry) => entry.status === 'rejected'),
    sentToday: all.filter(
      ({ status, sentAt }) => status === 'sent' && sentAt !== null && new Date(sentAt).toDateString() === today,
    ),
  };
}

function reading<T>({ cache, outbox }: Station, read: () => PromiseLike<T>): Promise<T> {
  return reopening([cache, outbox], read);
}

/** Tubs and batches of one moment, pending operations folded in. */
export function readShown(station: Station): Promise<Shown> {
  return reading(station, () => readOnce(station));
}

/** Cache and position first, then the outbox: an operation may then be missing from neither. */
async function readOnce({ cache, outbox }: Station): Promise<Shown> {
  const [buckets, batches, position] = await cache.transaction(
    'r',
    [cache.rows('buckets'), cache.rows('batches'), cache.meta],
    async () =>
      Promise.all([cache.rows('buckets').toArray(), cache.rows('batches').toArray(), cache.meta.get('position')]),
  );
  const seq = position?.seq ?? 0;
  const queued = await outbox.ops.orderBy('deviceSeq').toArray();
  const pending = queued.filter((entry) => isPendingAt(entry, seq));
  // Until the shop is loaded whole, or again, a row may be newer than the position.
  const isWhole = (position?.completeAt ?? null) !== null;
  const cached = isWhole ? { buckets: byId(buckets), batches: byId(batches) } : NOTHING;
  if (pending.length === 0) return cached;
  const [formulas, components, lots] = await Promise.all([
    cache.rows('formulas').toArray(),
    cache.rows('components').toArray(),
    cache.rows('lots').toArray(),
  ]);
  return foldPending(
    cached,
    pending.map((entry) => entry.operation),
    { formulas: byId(formulas), components: byId(components), lots: byId(lots) },
  );
}

const NOTHING: Shown = { buckets: new Map(), batches: new Map() };

function byId<T extends { id: string }>(rows: readonly T[]): Map<string, T> {
  return new Map(rows.map((row) => [row.id, row]));
}
