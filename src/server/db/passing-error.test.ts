import { expect, test } from 'vitest';
import { isPassing } from './passing-error.ts';

/** The sentences of pg 8.23, pg-pool 3 and kysely 0.28, as they stand in their sources. */
test.each([
  'Connection terminated',
  'Connection terminated unexpectedly',
  'Connection terminated due to connection timeout',
  'timeout exceeded when trying to connect',
  'Client has encountered a connection error and is not queryable',
  'Client was closed and is not queryable',
  'Query read timeout',
  'Postgres connection has been discarded',
])('“%s” decides nothing: the same request may succeed later', (message) => {
  expect(isPassing(new Error(message))).toBe(true);
});

test.each(['57P01', '57P03', '08006', '08P01', '40P01', '53300', '55P03', 'ECONNREFUSED', 'ECONNRESET', 'EPIPE'])(
  'an error with code %s decides nothing',
  (code) => {
    expect(isPassing(Object.assign(new Error('broken'), { code }))).toBe(true);
  },
);

test.each(['23505', '23503', '22003', '22P02', '42703'])('what PostgreSQL refuses with %s stays refused', (code) => {
  expect(isPassing(Object.assign(new Error('broken'), { code }))).toBe(false);
});

test('neither a mistake of ours nor a thrown nothing is passing', () => {
  expect(isPassing(new TypeError('x is not a function'))).toBe(false);
  expect(isPassing(undefined)).toBe(false);
  expect(isPassing(null)).toBe(false);
});
