import { expect, test } from 'vitest';
import { memoryStorage } from '#tests/support/station.ts';
import { enterInstall, leaveInstall, readInstalls } from './installs.ts';

test('remembers the install of every shop, and which one is in use', () => {
  const storage = memoryStorage();
  enterInstall(storage, 'shop-a', 'install-1');
  enterInstall(storage, 'shop-b', 'install-2');
  expect(readInstalls(storage)).toEqual({
    installs: { 'shop-a': 'install-1', 'shop-b': 'install-2' },
    current: { shopId: 'shop-b', installId: 'install-2' },
  });
});

test('leaving keeps the installs, so that the next sign-in finds its outbox', () => {
  const storage = memoryStorage();
  enterInstall(storage, 'shop-a', 'install-1');
  leaveInstall(storage);
  expect(readInstalls(storage)).toEqual({ installs: { 'shop-a': 'install-1' }, current: null });
});

test.each(['{', '{}', '[]', '{"installs":{},"current":{"shopId":1}}'])('reads a damaged pointer %s as none', (text) => {
  const storage = memoryStorage();
  storage.setItem('halfpail.installs', text);
  expect(readInstalls(storage)).toEqual({ installs: {}, current: null });
});
