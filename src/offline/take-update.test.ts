import { v7 as uuidv7 } from 'uuid';
import { expect, test, vi } from 'vitest';
import type { Weighing } from '#contract/weighing.ts';
import type { Milligrams } from '#domain/mass.ts';
import { makeBrowser, makeStation, START } from '#tests/support/station.ts';
import { openStation } from './station.ts';
import { takeUpdate } from './take-update.ts';
import { listWeighings, removeWeighing, saveWeighing } from './weighings.ts';

const free = <T>(run: () => Promise<T>) => run();

test('a waiting version is taken when nothing is open', async () => {
  const take = vi.fn<() => Promise<void>>(async () => {});
  expect(await takeUpdate(take, { weighingIsOpen: async () => false, alone: free })).toBe('taken');
  expect(take).toHaveBeenCalledOnce();
});

test('an open weighing is never interrupted', async () => {
  const take = vi.fn<() => Promise<void>>(async () => {});
  expect(await takeUpdate(take, { weighingIsOpen: async () => true, alone: free })).toBe('weighing-open');
  expect(take).not.toHaveBeenCalled();
});

test('neither is a run of the sync', async () => {
  const take = vi.fn<() => Promise<void>>(async () => {});
  const checks = { weighingIsOpen: async () => false, alone: async () => undefined };
  expect(await takeUpdate(take, checks)).toBe('sync-runs');
  expect(take).not.toHaveBeenCalled();
});

test('a batch that another tab of this station has open keeps this tab from the new version', async () => {
  const browser = makeBrowser();
  const station = await makeStation({}, browser);
  const otherTab = await openStation(browser);
  if (otherTab === undefined) throw new Error('The other tab does not open.');
  const take = vi.fn<() => Promise<void>>(async () => {});
  const checks = {
    weighingIsOpen: async () => (await listWeighings(station)).length > 0,
    alone: <T>(run: () => Promise<T>) => run(),
  };
  const open = openBatch();
  await saveWeighing(otherTab, open);
  expect(await takeUpdate(take, checks)).toBe('weighing-open');
  expect(take).not.toHaveBeenCalled();
  await removeWeighing(otherTab, open.id);
  expect(await takeUpdate(take, checks)).toBe('taken');
});

function openBatch(): Weighing {
  const at = START.toISOString();
  return {
    id: uuidv7(),
    formulaId: uuidv7(),
    revision: 1,
    jobId: null,
    rush: true,
    scaleId: uuidv7(),
    plannedMg: 1000 as Milligrams,
    batchMg: 1000 as Milligrams,
    remaining: [],
    leftovers: {},
    additions: [],
    startedAt: at,
    startedBy: uuidv7(),
    updatedAt: at,
  };
}
