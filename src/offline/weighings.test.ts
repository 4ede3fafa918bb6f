import { v7 as uuidv7 } from 'uuid';
import { expect, test } from 'vitest';
import type { Weighing } from '#contract/weighing.ts';
import type { Milligrams } from '#domain/mass.ts';
import { makeStation } from '#tests/support/station.ts';
import { findWeighing, listWeighings, removeWeighing, saveWeighing } from './weighings.ts';

function weighingAt(updatedAt: string): Weighing {
  return {
    id: uuidv7(),
    formulaId: uuidv7(),
    revision: 2,
    jobId: null,
    rush: true,
    scaleId: uuidv7(),
    plannedMg: 850_000 as Milligrams,
    batchMg: 850_000 as Milligrams,
    remaining: [{ kind: 'component', componentId: uuidv7(), plannedMg: 400_000 as Milligrams }],
    leftovers: { [uuidv7()]: [{ componentId: uuidv7(), ppb: 1_000_000_000 }] },
    additions: [],
    startedAt: '2026-11-30T08:00:00Z',
    startedBy: uuidv7(),
    updatedAt,
  };
}

test('a weighing comes back from the disk as it was saved', async () => {
  const station = await makeStation();
  const weighing = weighingAt('2026-11-30T08:05:00Z');
  await saveWeighing(station, weighing);
  expect(await findWeighing(station, weighing.id)).toEqual(weighing);
});

test('open batches are listed with the one touched last first', async () => {
  const station = await makeStation();
  const [old, recent] = [weighingAt('2026-11-30T08:05:00Z'), weighingAt('2026-11-30T09:00:00Z')];
  await saveWeighing(station, old);
  await saveWeighing(station, recent);
  expect((await listWeighings(station)).map(({ id }) => id)).toEqual([recent.id, old.id]);
});

test('a removed weighing is gone, the other stays', async () => {
  const station = await makeStation();
  const [first, second] = [weighingAt('2026-11-30T08:05:00Z'), weighingAt('2026-11-30T09:00:00Z')];
  await saveWeighing(station, first);
  await saveWeighing(station, second);
  await removeWeighing(station, first.id);
  expect((await listWeighings(station)).map(({ id }) => id)).toEqual([second.id]);
});

test('a weighing that does not fit its shape is not saved', async () => {
  const station = await makeStation();
  const wrong = { ...weighingAt('2026-11-30T08:05:00Z'), batchMg: 0 as Milligrams };
  await expect(saveWeighing(station, wrong)).rejects.toThrow('batchMg');
  expect(await listWeighings(station)).toEqual([]);
});

test('two tabs that log the same step: the second is told, and the first one’s step stands', async () => {
  const station = await makeStation();
  const shown = weighingAt('2026-11-30T08:05:00Z');
  await saveWeighing(station, shown);
  const first = { ...shown, batchMg: 860_000 as Milligrams, updatedAt: '2026-11-30T08:06:00Z' };
  const second = { ...shown, batchMg: 870_000 as Milligrams, updatedAt: '2026-11-30T08:07:00Z' };
  await saveWeighing(station, first, shown);
  await expect(saveWeighing(station, second, shown)).rejects.toThrow('another tab of this device');
  expect(await findWeighing(station, shown.id)).toEqual(first);
  await removeWeighing(station, shown.id);
  await expect(saveWeighing(station, second, first)).rejects.toThrow('finished already');
  expect(await listWeighings(station)).toEqual([]);
});

test('a step whose answer was lost and that is written again is no step of another tab', async () => {
  const station = await makeStation();
  const shown = weighingAt('2026-11-30T08:05:00Z');
  await saveWeighing(station, shown);
  const next = { ...shown, updatedAt: '2026-11-30T08:06:00Z' };
  await saveWeighing(station, next, shown);
  await saveWeighing(station, next, shown);
  expect(await findWeighing(station, shown.id)).toEqual(next);
});
