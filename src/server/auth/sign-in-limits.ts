import { RateLimiterMemory, type RateLimiterRes } from 'rate-limiter-flexible';
import { HttpProblem } from '#server/http/http-problem.ts';

const QUARTER_HOUR = 15 * 60;
/** Failures only: a shift that signs in behind one address is nothing unusual. */
const perEmail = new RateLimiterMemory({ points: 10, duration: QUARTER_HOUR });
const perAddress = new RateLimiterMemory({ points: 50, duration: QUARTER_HOUR });

interface Attempt {
  email: string;
  address: string;
}

/** @throws HttpProblem 429 with Retry-After after too many failures for the e-mail or from the address */
export async function requireFewFailures({ email, address }: Attempt): Promise<void> {
  const found = await Promise.all([perEmail.get(nameOf(email)), perAddress.get(address)]);
  const blocked = [perEmail.points, perAddress.points].flatMap((most, n) => {
    const state = found[n];
    return state !== null && state !== undefined && state.consumedPoints >= most ? [state] : [];
  });
  if (blocked.length > 0) throw tooMany(blocked);
}

export async function countFailure({ email, address }: Attempt): Promise<void> {
  await Promise.allSettled([perEmail.consume(nameOf(email)), perAddress.consume(address)]);
}

/** Whoever knows the password starts anew. */
export async function forgetFailures({ email }: Attempt): Promise<void> {
  await perEmail.delete(nameOf(email));
}

const nameOf = (email: string) => email.trim().toLowerCase();

function tooMany(blocked: readonly RateLimiterRes[]): HttpProblem {
  const seconds = Math.ceil(Math.max(...blocked.map((state) => state.msBeforeNext)) / 1000);
  const detail = `Too many tries. Wait ${Math.ceil(seconds / 60)} minutes, or ask a manager.`;
  return new HttpProblem(429, 'too-many-tries', 'Too many tries', detail, { 'Retry-After': String(seconds) });
}
