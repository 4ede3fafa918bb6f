import { differenceCiede2000 } from 'culori/fn';
import type { Lab } from './colour.ts';

const ciede2000 = differenceCiede2000();

/** A colour that was never measured, or not as three numbers. */
export class ColourError extends Error {
  override name = 'ColourError';
}

/**
 * ΔE00 of two colours under the same light (CIEDE2000: Sharma, Wu & Dalal 2005). @throws ColourError
 */
export function colourDifference(one: Lab, other: Lab): number {
  return ciede2000(given(one), given(other));
}

/** 'lab65' is the mode in which the library calculates: with 'lab' it would convert to another light first. */
function given({ l, a, b }: Lab): { mode: 'lab65'; l: number; a: number; b: number } {
  if (![l, a, b].every(Number.isFinite)) throw new ColourError(`L*a*b* must be three numbers, not ${l}, ${a}, ${b}.`);
  return { mode: 'lab65', l, a, b };
}
