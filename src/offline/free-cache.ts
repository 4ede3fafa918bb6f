import type { Table } from 'dexie';
import type { Row } from '#contract/rows.ts';
import type { Cache } from './cache.ts';
import { isDiskFull } from './disk-error.ts';
import { bornBuckets, touchedBuckets } from './touched-buckets.ts';
import type { Station } from './station.ts';

type Position = Cache['meta'] extends Table<infer M> ? M : never;

interface Needed {
  buckets: (row: Row<'buckets'>) => boolean;
  formulas: (row: Row<'formulas'>) => boolean;
}

/** Past batches and empty tubs; the next pull brings them back. */
export async function freeHistory(station: Station): Promise<void> {
  const named = await namedOnThisDevice(station);
  await freeRows(station.cache, {
    buckets: (row) => named.buckets.has(row.id) || (row.state !== 'empty' && row.state !== 'discarded'),
    formulas: () => true,
  });
}

/** Shelf and formulas but for what an open weighing or an unsent entry names. Inks, scales, pots and places stay. */
export async function freeUnneeded(station: Station): Promise<void> {
  const named = await namedOnThisDevice(station);
  await freeRows(station.cache, {
    buckets: ({ id }) => named.buckets.has(id),
    formulas: ({ id }) => named.formulas.has(id),
  });
}

async function namedOnThisDevice({ outbox }: Station): Promise<{ buckets: Set<string>; formulas: Set<string> }> {
  const weighings = await outbox.weighings.toArray();
  const waiting = await outbox.ops.where('status').equals('waiting').toArray();
  const buckets = waiting.flatMap(({ operation }) => [...touchedBuckets(operation), ...bornBuckets(operation)]);
  const formulas = waiting.flatMap(({ operation }) =>
    operation.type === 'batch-mixed' ? [operation.body.formulaId] : [],
  );
  const weighed = weighings.flatMap(({ additions, leftovers }) => [
    ...Object.keys(leftovers),
    ...additions.flatMap((addition) => (addition.kind === 'bucket' ? [addition.bucketId] : [])),
  ]);
  return {
    buckets: new Set([...buckets, ...weighed]),
    formulas: new Set([...formulas, ...weighings.map(({ formulaId }) => formulaId)]),
  };
}

/** Rows go and the next pull begins at the beginning, in one transaction; the rows that stay are as of the same change. */
async function freeRows(cache: Cache, needed: Needed): Promise<void> {
  const { meta } = cache;
  try {
    await dropRows(cache, needed, (position) => meta.put({ ...position, cursor: '' }));
  } catch (error) {
    if (!isDiskFull(error)) throw error;
    await freeWithoutRoom(cache, needed);
  }
}

/** A full disk takes deletions only; without its position the shop counts as not loaded, until the position fits again. */
async function freeWithoutRoom(cache: Cache, needed: Needed): Promise<void> {
  const { meta } = cache;
  let before: Position | undefined;
  await dropRows(cache, needed, async (position) => {
    before = position;
    await meta.clear();
  });
  if (before === undefined) return;
  const again = { ...before, cursor: '' };
  const putBack = async () => {
    // A pull may have begun anew meanwhile.
    if ((await meta.get('position')) === undefined) await meta.put(again);
  };
  await cache.transaction('rw', meta, putBack).catch(() => clearAll(cache));
}

/** A shop that is not loaded whole yet shows nothing, and goes whole. */
async function dropRows(cache: Cache, needed: Needed, mark: (position: Position) => PromiseLike<unknown>) {
  const [buckets, formulas, batches] = [cache.rows('buckets'), cache.rows('formulas'), cache.rows('batches')];
  await cache.transaction('rw', cache.tables, async () => {
    const position = await cache.meta.get('position');
    if (position === undefined || position.completeAt === null) {
      for (const table of cache.tables) await table.clear();
      return;
    }
    await mark(position);
    await batches.clear();
    await dropFrom(buckets, needed.buckets);
    await dropFrom(formulas, needed.formulas);
  });
}

async function dropFrom<R extends { id: string }>(table: Table<R, string>, isNeeded: (row: R) => boolean) {
  await table.filter((row) => !isNeeded(row)).delete();
}

async function clearAll(cache: Cache): Promise<void> {
  await cache.transaction('rw', cache.tables, async () => {
    for (const table of cache.tables) await table.clear();
  });
}
