import { milligrams } from './mass.ts';
import type { Milligrams } from './mass.ts';
import { type ScaleLimits, requireLimits } from './scale-limits.ts';
import { UncertaintyError, readingUncertainty } from './uncertainty-terms.ts';

export { foldInUncertainty } from './fold-in-uncertainty.ts';
export { UncertaintyError } from './uncertainty-terms.ts';
export { verdictOf } from './uncertainty-verdict.ts';

export interface WeighedAddition {
  componentId: string;
  mass: Milligrams;
  scale: ScaleLimits;
}

/**
 * Standard uncertainty (k = 1) of each component's share of a batch, dimensionless, from the readings alone (core
 * mathematics F; JCGM 100). Each reading has u_r² = d²/12 + s². Tared each time an addition has two readings of its own;
 * cumulative, neighbours share one, until another scale begins anew.
 * @throws UncertaintyError, MassError
 */
export function shareUncertainty(batch: {
  additions: readonly WeighedAddition[];
  method: 'tare-each' | 'cumulative';
}): ReadonlyMap<string, number> {
  const { additions, method } = batch;
  for (const { mass, scale } of additions) {
    milligrams(mass);
    requireLimits(scale);
  }
  const total = additions.reduce((sum, { mass }) => sum + mass, 0);
  if (total === 0) throw new UncertaintyError('Nothing was weighed in: there are no shares to be sure of.');
  const found = new Map<string, number>();
  for (const id of new Set(additions.map(({ componentId }) => componentId))) {
    const own = additions.reduce((sum, { componentId, mass }) => (componentId === id ? sum + mass : sum), 0);
    // How much a mg more of each addition changes the share, times the whole.
    const effects = additions.map(({ componentId }) => Number(componentId === id) - own / total);
    const variance = method === 'tare-each' ? tared(additions, effects) : cumulated(additions, effects);
    found.set(id, Math.sqrt(variance) / total);
  }
  return found;
}

/** Two readings of its own for each addition. */
function tared(additions: readonly WeighedAddition[], effects: readonly number[]): number {
  return additions.reduce(
    (sum, { scale }, n) => sum + 2 * (effects[n] as number) ** 2 * readingUncertainty(scale) ** 2,
    0,
  );
}

/** w_n = R_n − R_(n−1): a reading between two additions counts for the one and against the next. */
function cumulated(additions: readonly WeighedAddition[], effects: readonly number[]): number {
  let sum = 0;
  additions.forEach(({ scale }, n) => {
    const effect = effects[n] as number;
    const next = additions[n + 1];
    const goesOn = next !== undefined && isSame(scale, next.scale);
    const before = additions[n - 1];
    const begins = before === undefined || !isSame(before.scale, scale);
    const readings = effect - (goesOn ? (effects[n + 1] as number) : 0);
    sum += (readings ** 2 + (begins ? effect ** 2 : 0)) * readingUncertainty(scale) ** 2;
  });
  return sum;
}

function isSame(a: ScaleLimits, b: ScaleLimits): boolean {
  return a.readability === b.readability && a.repeatability === b.repeatability && a.maximum === b.maximum;
}
