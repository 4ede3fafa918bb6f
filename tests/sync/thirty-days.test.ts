import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import type { Operation } from '#contract/operation.ts';
import { LARGEST_PUSH_BYTES, LARGEST_PUSH_OPERATIONS } from '#contract/push.ts';
import { recordOperation } from '#offline/record-operation.ts';
import { readQueue, readShelf } from '#offline/shown.ts';
import { syncOnce } from '#offline/sync-once.ts';
import { seededRandom } from '#scripts/seed/random.ts';
import { inShop } from '#server/db/in-shop.ts';
import { openDemoStation } from './demo-station.ts';
import { type Technician, openPocketBook } from './thirty-days-work.ts';

const [DAYS, A_DAY] = [30, 100];
const [MINUTE, HOUR, DAY] = [60_000, 3_600_000, 86_400_000];
/** The device is 25 minutes ahead of the server; on the twentieth day somebody sets it a year ahead for ten entries. */
const AHEAD = 25 * MINUTE;
const [WRONG_DAY, A_YEAR] = [20, 365 * DAY];

const start = new Date();
let time = start.getTime();
let wrongBy = 0;
const clocks = { server: () => new Date(time), device: () => new Date(time + AHEAD + wrongBy) };

let demo: Awaited<ReturnType<typeof openDemoStation>>;
let technician: Technician;
const saved = new Map<string, Operation>();
const refused = new Set<string>();
/** Bytes and entries of each push, as sent. */
const pushes: { bytes: number; ops: number }[] = [];

beforeAll(async () => {
  demo = await openDemoStation(clocks);
  await sync();
  technician = await openPocketBook(demo.station);
  await workThirtyDays();
}, 300_000);
afterAll(async () => demo?.close());

const sync = () => syncOnce(demo.station, { ...demo.deps, fetch: counting }, () => {});

const counting: typeof fetch = (input, init) => {
  if (String(input) === '/api/sync/push') {
    const text = String(init?.body);
    pushes.push({ bytes: Buffer.byteLength(text), ops: (JSON.parse(text) as { ops: unknown[] }).ops.length });
  }
  return demo.deps.fetch(input, init);
};

/** A hundred entries a day, without a network; one in a hundred is one that the server will refuse. */
async function workThirtyDays(): Promise<void> {
  const random = seededRandom(30);
  for (let day = 0; day < DAYS; day++) {
    for (let n = 0; n < A_DAY; n++) {
      time = start.getTime() + day * DAY + HOUR + (n * 10 * HOUR) / A_DAY;
      wrongBy = day === WRONG_DAY && n < 10 ? A_YEAR : 0;
      const isRefused = n === 50;
      const body = isRefused
        ? technician.nextRefused(random)
        : await (day === 10 && n < 40 ? technician.nextLarge() : technician.next(random));
      const operation = await recordOperation(demo.station, body, demo.deps);
      saved.set(operation.opId, operation);
      if (isRefused) refused.add(operation.opId);
    }
  }
  time = start.getTime() + DAYS * DAY;
}

/** This install's entries as the server keeps them. */
async function readLog() {
  const { db, station } = demo;
  return inShop(db, station.shop.id, async (trx) => ({
    log: await trx.selectFrom('operations').selectAll().where('installId', '=', station.installId).execute(),
    quarantine: await trx.selectFrom('quarantine').select(['opId', 'raw']).execute(),
  }));
}

describe(`a station that was without a network for ${DAYS} days and ${DAYS * A_DAY} entries`, () => {
  test('shows the shelf as the pocket book has it, while all of it waits', async () => {
    const before = performance.now();
    const shelf = await readShelf(demo.station);
    const tookMs = performance.now() - before;
    console.log(`Shelf of ${shelf.length} tubs with ${saved.size} entries waiting: ${tookMs.toFixed(0)} ms`);
    expect((await readQueue(demo.station, clocks.device())).waiting).toHaveLength(DAYS * A_DAY);
    expect(balances(shelf)).toEqual(technician.book);
  });

  test('sends all of it, at most fifty entries and 256 KiB at a time', async () => {
    const before = performance.now();
    expect(await sync()).toEqual({ kind: 'done' });
    const tookMs = performance.now() - before;
    const largest = Math.max(...pushes.map(({ bytes }) => bytes));
    console.log(
      `${saved.size} entries in ${pushes.length} pushes, the largest ${largest} bytes: ${tookMs.toFixed(0)} ms`,
    );
    expect(pushes.every(({ ops, bytes }) => ops <= LARGEST_PUSH_OPERATIONS && bytes <= LARGEST_PUSH_BYTES)).toBe(true);
    expect(pushes.reduce((sum, { ops }) => sum + ops, 0)).toBe(saved.size);
    // Some were full by their size, or the limit was not tried.
    expect(pushes.filter(({ bytes }) => bytes > LARGEST_PUSH_BYTES / 2).length).toBeGreaterThan(2);
  });

  test('has each entry once in the log or, refused, in quarantine and in its own tray; nothing waits', async () => {
    const { log, quarantine } = await readLog();
    const { waiting, rejected } = await readQueue(demo.station, clocks.device());
    expect(waiting).toEqual([]);
    expect(new Set(rejected.map(({ opId }) => opId))).toEqual(refused);
    expect(new Set(quarantine.map(({ opId }) => opId))).toEqual(refused);
    expect([log.length, quarantine.length]).toEqual([saved.size - refused.size, refused.size]);
    for (const { opId, raw } of quarantine) expect(raw).toEqual(saved.get(opId));
    for (const { opId, envelope } of log) expect(envelope).toEqual(saved.get(opId));
  });

  test('has the entries marked that were recorded after the fourteen hours of its grant', async () => {
    const { log } = await readLog();
    const lapsed = new Set(log.filter(({ outcome }) => outcome === 'accepted-lapsed').map(({ opId }) => opId));
    const marked = [...saved.values()].filter(({ opId, grantLapsed }) => grantLapsed && !refused.has(opId));
    expect(new Set(marked.map(({ opId }) => opId))).toEqual(lapsed);
    expect(log.length - lapsed.size).toBe(A_DAY - 1);
  });

  test('keeps the time of its clock as it was, beside the corrected one, which is never after it was received', async () => {
    const { log } = await readLog();
    const received = start.getTime() + DAYS * DAY;
    let clamped = 0;
    for (const { opId, correctedTime, receivedAt } of log) {
      const { deviceTime, clock } = saved.get(opId) as Operation;
      expect(clock.offsetMs).toBe(-AHEAD);
      const corrected = Date.parse(deviceTime) - AHEAD;
      expect(correctedTime.getTime()).toBe(Math.min(corrected, received));
      expect(receivedAt.getTime()).toBe(received);
      if (corrected > received) clamped += 1;
    }
    expect(clamped).toBe(10);
  });

  test('shows after that what the server has: the balances of the pocket book', async () => {
    expect(balances(await readShelf(demo.station))).toEqual(technician.book);
    const { db, station } = demo;
    const rows = await inShop(db, station.shop.id, (trx) =>
      trx.selectFrom('buckets').select(['id', 'balanceMg']).execute(),
    );
    expect(balances(rows)).toEqual(technician.book);
  });
});

function balances(tubs: readonly { id: string; balanceMg: number }[]): Map<string, number> {
  const shown = new Map(tubs.map(({ id, balanceMg }) => [id, balanceMg]));
  return new Map([...technician.book.keys()].map((id) => [id, shown.get(id) ?? Number.NaN]));
}
