/** Whole milligrams, so that sums are exact. */
export type Milligrams = number & { readonly unit: 'mg' };
/** Whole parts per billion of a mass. */
export type PartsPerBillion = number & { readonly unit: 'ppb' };

/** A billion parts: the whole. */
export const WHOLE = 1_000_000_000 as PartsPerBillion;

/** A mass or a share that no batch can have. */
export class MassError extends Error {
  override name = 'MassError';
}

/** @param value whole milligrams, 0 or more @throws MassError */
export function milligrams(value: number): Milligrams {
  if (!Number.isSafeInteger(value) || value < 0)
    throw new MassError(`A mass is whole milligrams from 0 up, not ${value}.`);
  return value as Milligrams;
}

/** @param value whole parts per billion, 0 to a billion @throws MassError */
export function partsPerBillion(value: number): PartsPerBillion {
  if (!Number.isSafeInteger(value) || value < 0 || value > WHOLE) {
    throw new MassError(`A share is whole parts per billion from 0 to 1,000,000,000, not ${value}.`);
  }
  return value as PartsPerBillion;
}

/** @param readability the scale's step in mg @throws MassError when it is not a whole mass above 0 */
export function requireStep(readability: Milligrams): void {
  if (!Number.isSafeInteger(readability) || readability <= 0) {
    throw new MassError(`A scale's step is whole milligrams above 0, not ${readability}.`);
  }
}
