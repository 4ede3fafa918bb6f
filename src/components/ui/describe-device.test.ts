import { expect, test } from 'vitest';
import { describeJump, describeLost, listNumbers } from './describe-device.ts';

test.each([
  [[3], 1, '3'],
  [[3, 5], 2, '3 and 5'],
  [[3, 5, 6, 7, 9], 5, '3, 5–7 and 9'],
  [[1, 2], 250, '1–2 and 248 more'],
])('the numbers %j of %d read %s', (missing, missingCount, words) => {
  expect(listNumbers({ missing, missingCount })).toBe(words);
});

test('a cleared browser says what is safe, what never came and since when nothing is known', () => {
  const lost = {
    installId: 'x',
    sentUpTo: 41,
    missing: [39, 40],
    missingCount: 2,
    lastContact: '2026-12-01T14:20:00Z',
  };
  const words = describeLost(lost, 'en-GB');
  expect(words).toContain('Sent up to number 41 is safe. Numbers 39–40 never arrived.');
  expect(words).toMatch(/recorded after 1 Dec 2026 \d\d:20 may be lost too/);
  expect(describeLost({ ...lost, sentUpTo: 0, missing: [], missingCount: 0, lastContact: null }, 'en-GB')).toBe(
    'This browser cleared what it kept on this device. Nothing recorded here had been sent. Weigh those tubs again and tell a manager.',
  );
});

test.each([
  [3 * 60_000, '3 minutes ahead'],
  [-3_600_000, '60 minutes back'],
  [-5 * 3_600_000, '5 hours back'],
  [365 * 86_400_000, '365 days ahead'],
])('a jump of %d ms reads %s', (jumpMs, words) => {
  expect(describeJump({ at: '2026-12-01T14:20:00Z', jumpMs }, 'en-GB')).toContain(words);
});
