import { expect, test } from 'vitest';
import { Watched } from './sync-state.ts';

test('a watcher hears of each new value until it stops', () => {
  const watched = new Watched(1);
  const heard: number[] = [];
  const stop = watched.subscribe(() => heard.push(watched.getSnapshot()));
  watched.set(2);
  watched.set(3);
  stop();
  watched.set(4);
  expect(heard).toEqual([2, 3]);
  expect(watched.getSnapshot()).toBe(4);
});
