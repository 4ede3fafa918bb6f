import { expect, test } from 'vitest';
import { PageStore } from './page-store.ts';

const page = (changes: string) => ({ changes, last: undefined, count: 1 });

test('the oldest pages go when there are too many characters, and one that is too long is not kept', () => {
  const store = new PageStore(10);
  store.keep('a', page('1234'));
  store.keep('b', page('1234'));
  store.keep('a', page('other'));
  expect(store.find('a')?.changes).toBe('1234');
  store.keep('c', page('1234'));
  expect([store.find('a'), store.find('b')?.changes, store.find('c')?.changes]).toEqual([undefined, '1234', '1234']);
  store.keep('d', page('12345678901'));
  expect(store.find('d')).toBeUndefined();
  expect(store.find('c')?.changes).toBe('1234');
});
