import { afterEach, beforeEach, expect, test, vi } from 'vitest';
import { MOST_PUSHES_A_MINUTE, requireFewPushes } from './push-limits.ts';

beforeEach(() => void vi.useFakeTimers());
afterEach(() => void vi.useRealTimers());

const shopId = 'a shop';

test('a station that pushes too often is told when to go on, others are not, and then it goes on', async () => {
  for (let n = 0; n < MOST_PUSHES_A_MINUTE; n++) await requireFewPushes({ shopId, stationId: 'busy' });
  vi.advanceTimersByTime(20_000);
  await expect(requireFewPushes({ shopId, stationId: 'busy' })).rejects.toMatchObject({
    problem: { status: 429, code: 'too-many-pushes' },
    headers: { 'Retry-After': '40' },
  });
  await requireFewPushes({ shopId, stationId: 'quiet' });
  await requireFewPushes({ shopId: 'another shop', stationId: 'busy' });
  vi.advanceTimersByTime(40_001);
  await requireFewPushes({ shopId, stationId: 'busy' });
});
