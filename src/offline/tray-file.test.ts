import { v7 as uuidv7 } from 'uuid';
import { beforeEach, describe, expect, test } from 'vitest';
import { makeProblem } from '#contract/problem.ts';
import { batchMixed, fresh, relocated } from '#tests/support/operations.ts';
import { START, makeStation } from '#tests/support/station.ts';
import { recordOperation, takeBucketCode } from './record-operation.ts';
import type { Station } from './station.ts';
import { EntriesFileError, exportEntries, importEntries } from './tray-file.ts';

const deps = { now: () => START, randomId: uuidv7 };
const why = makeProblem(422, 'no-such-place', 'Not accepted', 'There is no such place in this shop.');
const allOf = ({ outbox }: Station) => outbox.ops.orderBy('deviceSeq').toArray();

let station: Station;

/** One sent, one refused, two waiting. */
beforeEach(async () => {
  station = await makeStation();
  const bodies = [
    relocated(uuidv7()),
    relocated(uuidv7()),
    batchMixed([fresh(uuidv7(), 500_000)]),
    relocated(uuidv7()),
  ];
  for (const body of bodies) await recordOperation(station, body, deps);
  const [first, second] = await allOf(station);
  await station.outbox.ops.update(first?.opId ?? '', { status: 'sent', changeSeq: 1, sentAt: START.toISOString() });
  await station.outbox.ops.update(second?.opId ?? '', { status: 'rejected', problem: why });
});

describe('a file of what waits and what needs a decision', () => {
  test('comes back whole on an empty device: each entry as it was, with its own numbers', async () => {
    const before = (await allOf(station)).filter(({ status }) => status !== 'sent');
    const { text, count, name } = await exportEntries(station, START);
    expect([count, name]).toEqual([3, 'halfpail-entries-2026-11-30-08-00.json']);
    await station.outbox.ops.clear();
    expect(await importEntries(station, text)).toEqual({ waiting: 2, rejected: 1, known: 0 });
    expect(await allOf(station)).toEqual(before);
  });

  test('says which format and version it has, of which shop and device, and when it was saved', async () => {
    const { text } = await exportEntries(station, START);
    expect(JSON.parse(text)).toMatchObject({
      format: 'halfpail-entries',
      version: 1,
      exportedAt: START.toISOString(),
      shop: { id: station.shop.id, name: 'Harbour Ink Room' },
      station: station.station,
    });
  });

  test('read again adds nothing, and leaves what was sent or dropped meanwhile as it is', async () => {
    const { text } = await exportEntries(station, START);
    const [, refused, waiting] = await allOf(station);
    await station.outbox.ops.update(refused?.opId ?? '', { status: 'dropped' });
    await station.outbox.ops.update(waiting?.opId ?? '', { status: 'sent', changeSeq: 9 });
    const before = await allOf(station);
    expect(await importEntries(station, text)).toEqual({ waiting: 0, rejected: 0, known: 3 });
    expect(await allOf(station)).toEqual(before);
  });

  test('is taken by another device of the shop under the numbers of the first one', async () => {
    const { text } = await exportEntries(station, START);
    const other = await makeStation({ shopId: station.shop.id });
    await recordOperation(other, relocated(uuidv7()), deps);
    expect(await importEntries(other, text)).toEqual({ waiting: 2, rejected: 1, known: 0 });
    const installs = (await allOf(other)).map(({ operation }) => operation.installId);
    expect(installs.filter((id) => id === station.installId)).toHaveLength(3);
    expect((await recordOperation(other, relocated(uuidv7()), deps)).deviceSeq).toBe(2);
  });

  test('is known to later entries on the same tub as what the first device recorded', async () => {
    const tub = (await allOf(station))[3]?.operation.body as { bucketId: string };
    const { text } = await exportEntries(station, START);
    const other = await makeStation({ shopId: station.shop.id });
    await importEntries(other, text);
    const later = await recordOperation(other, relocated(tub.bucketId), deps);
    expect(later.seen).toEqual({ [tub.bucketId]: { [station.installId]: 4 } });
  });

  test('makes a device that lost its entries count on: neither numbers nor tub codes are given again', async () => {
    const { text } = await exportEntries(station, START);
    const given = await takeBucketCode(station);
    await station.outbox.ops.clear();
    await station.outbox.keys.bulkDelete(['deviceSeq', 'tubCounter']);
    await importEntries(station, text);
    expect((await recordOperation(station, relocated(uuidv7()), deps)).deviceSeq).toBe(5);
    expect(await takeBucketCode(station)).not.toBe(given);
  });

  test('of nothing is read as nothing', async () => {
    await station.outbox.ops.clear();
    const { text, count } = await exportEntries(station, START);
    expect(count).toBe(0);
    expect(await importEntries(station, text)).toEqual({ waiting: 0, rejected: 0, known: 0 });
  });
});

describe('a file that cannot be taken says why and changes nothing', () => {
  const bend = async (change: (file: { entries: Record<string, unknown>[] } & Record<string, unknown>) => unknown) => {
    const file = JSON.parse((await exportEntries(station, START)).text) as never;
    return JSON.stringify(change(file) ?? file);
  };
  test.each<[string, Parameters<typeof bend>[0], string]>([
    ['another kind of JSON', () => ({ rows: [] }), 'not a file of saved logs'],
    ['a newer version', (file) => ({ ...file, version: 2 }), 'newer version'],
    ['version 0', (file) => ({ ...file, version: 0 }), 'damaged'],
    ['another shop', (file) => ({ ...file, shop: { id: uuidv7(), name: 'Kiln Lane' } }), 'another shop, Kiln Lane'],
    ['no list of entries', (file) => ({ ...file, entries: null }), 'damaged'],
    ['an entry that is a word', (file) => ({ ...file, entries: [...file.entries, 'x'] }), 'Entry 4 cannot be read'],
    ['a sent entry', (file) => void Object.assign(file.entries[1] ?? {}, { status: 'sent' }), 'Entry 2'],
    [
      'an entry with a mass below 0',
      (file) => {
        const { operation } = file.entries[1] as { operation: { body: { additions: { actualMg: number }[] } } };
        Object.assign(operation.body.additions[0] ?? {}, { actualMg: -5 });
      },
      'Entry 2 cannot be read',
    ],
    ['an entry twice', (file) => ({ ...file, entries: [...file.entries, file.entries[0]] }), 'twice'],
  ])('%s', async (_, change, sentence) => {
    const text = await bend(change);
    const before = await allOf(station);
    await station.outbox.ops.bulkDelete(before.slice(2).map(({ opId }) => opId));
    const left = await allOf(station);
    const reading = importEntries(station, text);
    await expect(reading).rejects.toThrow(EntriesFileError);
    await expect(reading).rejects.toThrow(sentence);
    expect(await allOf(station)).toEqual(left);
  });

  test.each(['', 'not JSON', '{"format":"halfpail-entries"', '[]', 'null', '3', '\u0000'])('"%s"', async (text) => {
    const reading = importEntries(station, text);
    await expect(reading).rejects.toThrow('not a file of saved logs');
  });
});
