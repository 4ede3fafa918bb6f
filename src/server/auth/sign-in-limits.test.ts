import { expect, test } from 'vitest';
import { countFailure, forgetFailures, requireFewFailures } from './sign-in-limits.ts';

const refusal = {
  problem: { status: 429, code: 'too-many-tries' },
  headers: { 'Retry-After': expect.stringMatching(/^\d+$/) },
};

test('ten wrong passwords for an e-mail, from wherever, and it waits; another one does not', async () => {
  for (let n = 0; n < 10; n++) {
    await requireFewFailures({ email: 'A@example.test', address: `10.0.0.${n}` });
    await countFailure({ email: 'A@example.test', address: `10.0.0.${n}` });
  }
  await expect(requireFewFailures({ email: ' a@EXAMPLE.test', address: '10.0.1.1' })).rejects.toMatchObject(refusal);
  await requireFewFailures({ email: 'b@example.test', address: '10.0.0.1' });
});

test('fifty failures from one address, and it waits, whatever e-mail it names', async () => {
  for (let n = 0; n < 50; n++) await countFailure({ email: `c${n}@example.test`, address: '10.9.9.9' });
  await expect(requireFewFailures({ email: 'd@example.test', address: '10.9.9.9' })).rejects.toMatchObject(refusal);
});

test('whoever signs in starts anew', async () => {
  const attempt = { email: 'e@example.test', address: '10.7.7.7' };
  for (let n = 0; n < 9; n++) await countFailure(attempt);
  await forgetFailures(attempt);
  for (let n = 0; n < 9; n++) await countFailure(attempt);
  await expect(requireFewFailures(attempt)).resolves.toBeUndefined();
});
