import type { Milligrams } from './mass.ts';

/** Grams with as many decimals as the scale's step has, in the locale: points line up. Display only. */
export function formatGrams(mass: Milligrams, readability: Milligrams, locale: string): string {
  const decimals = decimalsOf(readability);
  return new Intl.NumberFormat(locale, {
    minimumFractionDigits: decimals,
    maximumFractionDigits: decimals,
    useGrouping: false,
  }).format(mass / 1000);
}

function decimalsOf(step: number): number {
  if (step % 1000 === 0) return 0;
  if (step % 100 === 0) return 1;
  return step % 10 === 0 ? 2 : 3;
}
