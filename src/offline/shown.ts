import type { Row, TableName } from '#contract/rows.ts';
import type { QueuedOperation } from './outbox.ts';
import { type Shown, foldPending } from './overlay.ts';
import type { Station } from './station.ts';

/** True once the shop has been loaded whole onto this device. */
export async function isLoaded(station: Station): Promise<boolean> {
  return ((await station.cache.meta.get('position'))?.completeAt ?? null) !== null;
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
  return station.cache.rows('formulas').toArray();
}

export function readFormula(station: Station, id: string): Promise<Row<'formulas'> | undefined> {
  return station.cache.rows('formulas').get(id);
}

export function readRows<T extends TableName>(station: Station, table: T): Promise<Row<T>[]> {
  return station.cache.rows(table).toArray();
}

export interface Queue {
  waiting: QueuedOperation[];
  rejected: QueuedOperation[];
  sentToday: QueuedOperation[];
}

/** The outbox in the order of recording. */
export async function readQueue(station: Station, now: Date = new Date()): Promise<Queue> {
  const all = await station.outbox.ops.orderBy('deviceSeq').toArray();
  const today = now.toDateString();
  return {
    waiting: all.filter((entry) => entry.status === 'waiting'),
    rejected: all.filter((entry) => entry.status === 'rejected'),
    sentToday: all.filter(
      ({ status, sentAt }) => status === 'sent' && sentAt !== null && new Date(sentAt).toDateString() === today,
    ),
  };
}

/** Cache and position first, then the outbox: an operation may then be missing from neither. */
async function readShown(station: Station): Promise<Shown> {
  const { cache, outbox } = station;
  const [buckets, batches, position] = await cache.transaction(
    'r',
    [cache.rows('buckets'), cache.rows('batches'), cache.meta],
    async () =>
      Promise.all([cache.rows('buckets').toArray(), cache.rows('batches').toArray(), cache.meta.get('position')]),
  );
  const seq = position?.seq ?? 0;
  const queued = await outbox.ops.orderBy('deviceSeq').toArray();
  const pending = queued.filter(
    (entry) => entry.status === 'waiting' || (entry.status === 'sent' && (entry.changeSeq ?? 0) > seq),
  );
  const cached = { buckets: byId(buckets), batches: byId(batches) };
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

function byId<T extends { id: string }>(rows: readonly T[]): Map<string, T> {
  return new Map(rows.map((row) => [row.id, row]));
}
