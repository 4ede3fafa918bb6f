import fc from 'fast-check';
import { v7 as uuidv7 } from 'uuid';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { recordOperation } from '#offline/record-operation.ts';
import { readQueue, readRows, readShelf } from '#offline/shown.ts';
import { syncOnce } from '#offline/sync-once.ts';
import { exportEntries, importEntries } from '#offline/tray-file.ts';
import { canTakeBack, correctEntry, dropEntry, takeBackDrop } from '#offline/tray.ts';
import { inShop } from '#server/db/in-shop.ts';
import { relocated } from '#tests/support/operations.ts';
import { openDemoStation } from './demo-station.ts';

let demo: Awaited<ReturnType<typeof openDemoStation>>;
let place: string;
let tub: string;
/** Each entry and the one that it corrects in the end. */
const roots = new Map<string, string>();

beforeAll(async () => {
  demo = await openDemoStation();
  await sync('answered');
  place = (await readRows(demo.station, 'locations'))[0]?.id ?? '';
  tub = (await readShelf(demo.station)).find(({ state }) => state === 'shelf')?.id ?? '';
}, 120_000);
afterAll(() => demo?.close());

const ACTS = [
  'right',
  'wrong',
  'mend',
  'mend badly',
  'drop',
  'take back',
  'answered',
  'unanswered',
  'old file',
] as const;
type Act = (typeof ACTS)[number];
const wrongly = () => relocated(tub, uuidv7());

/** Sends and fetches; without an answer the server has done its part all the same. */
async function sync(how: 'answered' | 'unanswered'): Promise<void> {
  const { station, deps } = demo;
  const fetch: typeof globalThis.fetch = async (input, init) => {
    const response = await deps.fetch(input, init);
    if (how === 'unanswered') throw new TypeError('Failed to fetch');
    return response;
  };
  await syncOnce(station, { ...deps, fetch }, () => {});
}

async function record(body: ReturnType<typeof relocated>): Promise<void> {
  const { opId } = await recordOperation(demo.station, body);
  roots.set(opId, opId);
}

async function mend(body: ReturnType<typeof relocated>): Promise<void> {
  const [first] = (await readQueue(demo.station)).rejected;
  if (first === undefined) return;
  // A drop that was refused is dropped anew: it has no place.
  if (first.operation.type !== 'bucket-relocated') return;
  const { opId } = await correctEntry(demo.station, first.opId, body);
  roots.set(opId, roots.get(first.opId) ?? '');
}

async function drop(): Promise<void> {
  const [first] = (await readQueue(demo.station)).rejected;
  if (first !== undefined) await dropEntry(demo.station, first.opId, 'Typed twice');
}

async function takeBack(): Promise<void> {
  const drop = (await readQueue(demo.station)).waiting.find(canTakeBack);
  if (drop !== undefined) await takeBackDrop(demo.station, drop.opId);
}

/** A device that lost what it had settled reads it from a file of before, when it still waited. */
async function readOldFile(text: string): Promise<void> {
  const { station } = demo;
  const old = (JSON.parse(text) as { entries: { operation: { opId: string } }[] }).entries;
  for (const { operation } of old) {
    const status = (await station.outbox.ops.get(operation.opId))?.status;
    if (status === 'sent' || status === 'dropped') await station.outbox.ops.delete(operation.opId);
  }
  await importEntries(station, text);
}

async function perform(act: Act, file: { text: string }): Promise<void> {
  if (act === 'right') await record(relocated(tub, place));
  else if (act === 'wrong') await record(wrongly());
  else if (act === 'mend') await mend(relocated(tub, place));
  else if (act === 'mend badly') await mend(wrongly());
  else if (act === 'drop') await drop();
  else if (act === 'take back') await takeBack();
  else if (act !== 'old file') await sync(act);
  else if (file.text !== '') await readOldFile(file.text);
  const { waiting, rejected } = await readQueue(demo.station);
  if (rejected.length === 0 && waiting.every(({ operation }) => operation.type === 'bucket-relocated'))
    file.text = (await exportEntries(demo.station)).text;
}

async function onServer() {
  const { station, db } = demo;
  return inShop(db, station.shop.id, async (trx) => ({
    open: await trx
      .selectFrom('quarantine')
      .select('opId')
      .where('stationId', '=', station.station.id)
      .where('resolvedBy', 'is', null)
      .execute(),
    log: await trx.selectFrom('operations').select('opId').where('installId', '=', station.installId).execute(),
  }));
}

test('whatever is corrected, dropped, taken back, lost on the way or read again: the tray is what the server has not settled, and of an entry and its corrections one counts at most', async () => {
  await fc.assert(
    fc.asyncProperty(fc.array(fc.constantFrom(...ACTS), { minLength: 5, maxLength: 25 }), async (acts) => {
      const file = { text: '' };
      for (const act of acts) await perform(act, file);
      await sync('answered');
      await sync('answered');
      const { waiting, rejected } = await readQueue(demo.station);
      const { open, log } = await onServer();
      expect(waiting).toEqual([]);
      expect(new Set(rejected.map(({ opId }) => opId))).toEqual(new Set(open.map(({ opId }) => opId)));
      const counted = log.flatMap(({ opId }) => roots.get(opId) ?? []);
      expect(new Set(counted).size).toBe(counted.length);
    }),
    { numRuns: 25 },
  );
}, 180_000);
