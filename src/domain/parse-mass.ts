import type { Milligrams } from './mass.ts';

export type ReadMass = { mass: Milligrams } | { problem: string };

const LARGEST = 100_000_000 as Milligrams;
const PLAIN = /^\d{1,9}(?:[.,]\d{1,9})?$/;
/** One separator, one to three digits before it, exactly three after: a thousand, or a fraction? */
const AMBIGUOUS = /^[1-9]\d{0,2}[.,]\d{3}$/;
const MG_DECIMALS = { g: 3, kg: 6 } as const;

/**
 * Reads a typed mass; comma and point are both decimal. Exact: no floating point.
 * @param options `readability`: the scale's step in mg; `maximum` in mg, 100 kg when left out
 * @returns whole mg above 0, or a sentence that says what to do
 */
export function parseMass(
  text: string,
  options: { unit: 'g' | 'kg'; readability?: Milligrams; maximum?: Milligrams },
): ReadMass {
  const typed = text.trim();
  const maximum = options.maximum ?? LARGEST;
  if (typed === '') return { problem: `Type a mass in ${options.unit}.` };
  if (/^[-−]/.test(typed)) return { problem: 'A mass is above 0. Leave the minus out.' };
  if (!PLAIN.test(typed)) return { problem: `“${typed.slice(0, 20)}” is not a mass. Type digits, like 850.5.` };
  if (AMBIGUOUS.test(typed)) {
    const digits = typed.replace(/[.,]/, '');
    return { problem: `${typed} can mean two things. Type ${digits} or ${typed.replace(',', '.')}0.` };
  }
  const mass = toMilligrams(typed, MG_DECIMALS[options.unit]);
  if (mass === undefined) return { problem: `Finer than 1 mg. Type fewer decimals.` };
  if (mass === 0) return { problem: 'A mass is above 0.' };
  if (mass > maximum) return { problem: `Over ${maximum / 1000} g, more than it can carry. Type less.` };
  const step = options.readability;
  if (step !== undefined && mass % step !== 0)
    return { problem: `The scale shows steps of ${step / 1000} g. Type such a mass.` };
  return { mass: mass as Milligrams };
}

function toMilligrams(typed: string, decimals: number): number | undefined {
  const [whole = '', fraction = ''] = typed.split(/[.,]/);
  const kept = fraction.replace(/0+$/, '');
  if (kept.length > decimals) return undefined;
  return Number(whole + kept.padEnd(decimals, '0'));
}
