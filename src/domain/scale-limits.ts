import { MassError, type Milligrams, milligrams, requireStep } from './mass.ts';

/** What a scale can show; masses in mg. `errorLimit` is ℓ, the relative weighing error that is warned about. */
export interface ScaleLimits {
  readability: Milligrams;
  repeatability: Milligrams;
  minimum: Milligrams;
  maximum: Milligrams;
  errorLimit: number;
}

/** @throws MassError */
export function requireLimits(scale: ScaleLimits): void {
  requireStep(scale.readability);
  for (const mass of [scale.repeatability, scale.minimum, scale.maximum]) milligrams(mass);
  if (!(scale.errorLimit > 0 && scale.errorLimit < 1)) {
    throw new MassError(`The error limit is a part of the weight, above 0 and below 1, not ${scale.errorLimit}.`);
  }
}

/**
 * m_ℓ in mg, not rounded: the least mass whose k = 2 uncertainty is within ℓ of it. 2√2·√(d²/12 + s²)/ℓ, a net weight
 * being the difference of two readings (JCGM 100).
 */
export function leastMassWithin(scale: Pick<ScaleLimits, 'readability' | 'repeatability' | 'errorLimit'>): number {
  const { readability: d, repeatability: s } = scale;
  return (2 * Math.SQRT2 * Math.sqrt((d * d) / 12 + s * s)) / scale.errorLimit;
}
