import { expect, test } from 'vitest';
import { countResults } from '#scripts/run-vitest.mjs';

const file = (status: string, ...tests: string[]) => ({
  status,
  assertionResults: tests.map((each) => ({ status: each })),
});

test('adds up the tests of every file', () => {
  expect(countResults([file('passed', 'passed', 'passed'), file('failed', 'passed', 'failed')], 1)).toEqual({
    passed: 3,
    failed: 1,
  });
});

test('counts a file that could not be loaded as one failure', () => {
  expect(countResults([file('passed', 'passed'), file('failed')], 1)).toEqual({ passed: 1, failed: 1 });
});

test('counts a run that ended badly without a failed test as one failure', () => {
  expect(countResults([file('passed', 'passed')], 1)).toEqual({ passed: 1, failed: 1 });
});

test('counts a run of no test as one failure, whatever its exit code', () => {
  expect(countResults([], 0)).toEqual({ passed: 0, failed: 1 });
});
