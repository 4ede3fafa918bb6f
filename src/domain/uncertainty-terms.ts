import type { ScaleLimits } from './scale-limits.ts';

/** Masses or shares of which nothing can be said; the message says what is missing. */
export class UncertaintyError extends Error {
  override name = 'UncertaintyError';
}

/** Standard uncertainty of a value that lies anywhere within ±halfWidth (JCGM 100, 4.3.7). */
export function rectangular(halfWidth: number): number {
  return halfWidth / Math.sqrt(3);
}

/** Of a sum of independent terms, of one unit (JCGM 100, 5.1.2). */
export function combined(...terms: readonly number[]): number {
  return Math.sqrt(terms.reduce((sum, term) => sum + term * term, 0));
}

/** u_r in mg of one reading: √(d²/12 + s²). */
export function readingUncertainty({
  readability,
  repeatability,
}: Pick<ScaleLimits, 'readability' | 'repeatability'>): number {
  return combined(rectangular(readability / 2), repeatability);
}
