import { expect, test, vi } from 'vitest';
import { takeUpdate } from './take-update.ts';

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
