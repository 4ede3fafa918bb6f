import * as z from 'zod/mini';
import { instant, uuid } from '#contract/identifiers.ts';
import { operation as operationSchema } from '#contract/operation.ts';
import { problem } from '#contract/problem.ts';
import { findKey, putKey } from './outbox-keys.ts';
import type { QueuedOperation } from './outbox.ts';
import type { Station } from './station.ts';
import { tubsOf } from './touched-buckets.ts';
import { withRoom } from './with-room.ts';

/** A file that nothing was read from; the message says what to do. */
export class EntriesFileError extends Error {
  override name = 'EntriesFileError';
}

const FORMAT = 'halfpail-entries';
const VERSION = 1;
/** A year of entries is a tenth of this. */
const LARGEST_CHARACTERS = 64 * 1024 * 1024;

const head = z.object({ format: z.literal(FORMAT), version: z.int() });
const entry = z.object({
  status: z.enum(['waiting', 'rejected']),
  recordedAt: instant,
  /** Why the server refused it; null while it waits. */
  problem: z.nullable(problem),
  operation: operationSchema,
});
const content = z.object({
  exportedAt: instant,
  shop: z.object({ id: uuid, name: z.string() }),
  station: z.object({ id: uuid, name: z.string() }),
  entries: z.array(z.unknown()),
});
type Entry = z.infer<typeof entry>;

export interface SavedEntries {
  name: string;
  text: string;
  count: number;
}

/** Queue and tray of this device as JSON, each entry as it was recorded. */
export async function exportEntries(station: Station, now: Date = new Date()): Promise<SavedEntries> {
  const all = await station.outbox.ops.where('status').anyOf('waiting', 'rejected').sortBy('deviceSeq');
  const exportedAt = now.toISOString();
  const { shop, station: device } = station;
  const file = {
    format: FORMAT,
    version: VERSION,
    exportedAt,
    shop: { id: shop.id, name: shop.name },
    station: device,
    entries: all.map(({ status, recordedAt, problem: why, operation }) => ({
      status,
      recordedAt,
      problem: why,
      operation,
    })),
  };
  const name = `halfpail-entries-${exportedAt.slice(0, 16).replace(/[:T]/g, '-')}.json`;
  return { name, text: JSON.stringify(file, null, 2), count: all.length };
}

export interface Imported {
  waiting: number;
  rejected: number;
  /** This device had them already, in whatever state. */
  known: number;
}

/**
 * Takes what this device does not know into queue and tray, with the numbers that it had; all of a file or nothing of it.
 * @throws EntriesFileError
 * @throws RecordError when the device is full
 */
export async function importEntries(station: Station, text: string, now: Date = new Date()): Promise<Imported> {
  const entries = readEntries(station, text);
  const { outbox } = station;
  return withRoom(station, now, () =>
    outbox.transaction('rw', outbox.ops, outbox.keys, async () => {
      const found = await outbox.ops.bulkGet(entries.map(({ operation }) => operation.opId));
      const unknown = entries.filter((_, n) => found[n] === undefined);
      await outbox.ops.bulkAdd(unknown.map(asQueued));
      await keepNumbers(station, unknown);
      const waiting = unknown.filter(({ status }) => status === 'waiting').length;
      return { waiting, rejected: unknown.length - waiting, known: entries.length - unknown.length };
    }),
  );
}

function readEntries(station: Station, text: string): Entry[] {
  if (text.length > LARGEST_CHARACTERS) throw new EntriesFileError('This file is too large for saved logs.');
  const json = parseJson(text);
  const kind = head.safeParse(json);
  if (!kind.success) throw new EntriesFileError('This is not a file of saved logs. Choose another one.');
  if (kind.data.version > VERSION)
    throw new EntriesFileError('A newer version of this app saved this file. Update this app, then read it.');
  const file = content.safeParse(json);
  if (kind.data.version !== VERSION || !file.success) throw new EntriesFileError(DAMAGED);
  if (file.data.shop.id !== station.shop.id)
    throw new EntriesFileError(
      `These logs are of another shop, ${file.data.shop.name}. Read them on a device of that shop.`,
    );
  const entries = file.data.entries.map(readEntry);
  if (new Set(entries.map(({ operation }) => operation.opId)).size < entries.length)
    throw new EntriesFileError(`An entry is in this file twice. ${DAMAGED}`);
  return entries;
}

const DAMAGED = 'The file is damaged. Save it again where it came from. Nothing was read.';

function readEntry(json: unknown, n: number): Entry {
  const read = entry.safeParse(json);
  if (read.success) return read.data;
  const where = read.error.issues[0]?.path.join('.') ?? '';
  throw new EntriesFileError(`Entry ${n + 1} cannot be read${where === '' ? '' : ` (${where})`}. ${DAMAGED}`);
}

function parseJson(text: string): unknown {
  try {
    return JSON.parse(text);
  } catch {
    return undefined;
  }
}

function asQueued({ status, recordedAt, problem: why, operation }: Entry): QueuedOperation {
  return {
    opId: operation.opId,
    deviceSeq: operation.deviceSeq,
    operation,
    tubs: tubsOf(operation),
    status,
    changeSeq: null,
    problem: why,
    recordedAt,
    sentAt: null,
  };
}

/** An outbox that lost entries counts on from what it gets back: neither numbers nor codes are given again. */
async function keepNumbers({ outbox, installId }: Station, entries: readonly Entry[]): Promise<void> {
  const own = entries.map(({ operation }) => operation).filter((operation) => operation.installId === installId);
  if (own.length === 0) return;
  const last = Math.max(...own.map(({ deviceSeq }) => deviceSeq));
  const filled = own.flatMap(({ type, body }) => (type === 'batch-mixed' ? body.filled : [])).length;
  const seq = (await findKey(outbox, 'deviceSeq')) ?? 0;
  if (last <= seq) return;
  await putKey(outbox, 'deviceSeq', last);
  await putKey(outbox, 'tubCounter', Math.max((await findKey(outbox, 'tubCounter')) ?? 0, last) + filled);
}
