import { expect, test } from 'vitest';
import { answerNavigation } from './strategy.ts';

test.each(['/b/MN7W-YDF4', '/b/MN7WYDF4', '/B/MN7W-YDF4', '/b/mn7w-ydf4', '/b/MN7WYDF4/'])(
  'a tub’s link %s is answered by the tub’s shell',
  (path) => expect(answerNavigation(path)).toEqual({ from: 'shell', page: '/shell/bucket' }),
);

test.each(['/api', '/api/sync/pull', '/office', '/office/people', '/office/'])('%s is the server’s alone', (path) =>
  expect(answerNavigation(path)).toEqual({ from: 'network' }),
);

test.each([
  ['/', '/'],
  ['/shelf', '/shelf'],
  ['/shelf/', '/shelf'],
  ['/sign-in', '/sign-in'],
  ['/nowhere', '/nowhere'],
  ['/officer', '/officer'],
  ['/b', '/b'],
  ['/b/x', '/b/x'],
  ['/b/MN7W/print', '/b/MN7W/print'],
])('%s is asked of the network, else it is the page %s', (path, page) =>
  expect(answerNavigation(path)).toEqual({ from: 'network-or-shell', page }),
);
