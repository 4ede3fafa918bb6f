import type { Milligrams } from './mass.ts';

/** Accuracy classes of OIML R 76-1 that ink rooms have: II (high) and III (medium). */
export type ScaleClass = 'II' | 'III';

/** A scale or a load that its class does not know. */
export class ScaleClassError extends Error {
  override name = 'ScaleClassError';
}

/** Loads in verification intervals e up to which the error may be 0.5, 1 and 1.5 e: OIML R 76-1, table 6. */
const LIMITS: Record<ScaleClass, readonly [number, number, number]> = {
  II: [5000, 20_000, 100_000],
  III: [500, 2000, 10_000],
};

/** mg by which a new scale may be off at this load (OIML R 76-1, table 6). @param e the verification interval, mg @throws ScaleClassError */
export function maximumPermissibleError(scaleClass: ScaleClass, e: Milligrams, load: Milligrams): number {
  requireInterval(e);
  if (!(load >= 0)) throw new ScaleClassError(`A load is 0 mg or more, not ${load}.`);
  const step = LIMITS[scaleClass].findIndex((limit) => load <= limit * e);
  if (step === -1) throw new ScaleClassError(`A class ${scaleClass} scale of ${e} mg has no load of ${load} mg.`);
  return ((step + 1) / 2) * e;
}

/** In service twice as much is allowed. */
export function inServiceError(scaleClass: ScaleClass, e: Milligrams, load: Milligrams): number {
  return 2 * maximumPermissibleError(scaleClass, e, load);
}

/** mg: the least load (Min) of a scale, OIML R 76-1, table 3. @throws ScaleClassError */
export function leastLoad(scaleClass: ScaleClass, e: Milligrams): Milligrams {
  requireInterval(e);
  return ((scaleClass === 'II' && e >= 100 ? 50 : 20) * e) as Milligrams;
}

function requireInterval(e: number): void {
  if (!Number.isSafeInteger(e) || e <= 0)
    throw new ScaleClassError(`A verification interval is whole mg above 0, not ${e}.`);
}
