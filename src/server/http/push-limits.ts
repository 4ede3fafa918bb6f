import { RateLimiterMemory, RateLimiterRes } from 'rate-limiter-flexible';
import { HttpProblem } from './http-problem.ts';

/** A month's queue of 3,000 logs is sixty pushes. */
export const MOST_PUSHES_A_MINUTE = 120;
const perStation = new RateLimiterMemory({ points: MOST_PUSHES_A_MINUTE, duration: 60 });

/**
 * A station that pushes without a pause leaves the others room. A courtesy of one process: with two of them it may push
 * twice as often, and nothing depends on it.
 * @throws HttpProblem 429 with Retry-After, before anything of the push is read
 */
export async function requireFewPushes({ shopId, stationId }: { shopId: string; stationId: string }): Promise<void> {
  await perStation.consume(`${shopId} ${stationId}`).catch((full: unknown) => {
    if (!(full instanceof RateLimiterRes)) throw full;
    const seconds = Math.max(1, Math.ceil(full.msBeforeNext / 1000));
    throw new HttpProblem(
      429,
      'too-many-pushes',
      'Too many pushes',
      `This device sends very often. It goes on by itself in ${seconds} s.`,
      { 'Retry-After': String(seconds) },
    );
  });
}
