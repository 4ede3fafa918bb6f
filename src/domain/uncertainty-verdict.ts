import { UncertaintyError } from './uncertainty-terms.ts';

/** How many standard uncertainties are said: about 95 % (JCGM 100, 6.3.3). */
export const COVERAGE_FACTOR = 2;

export type Verdict = 'on-target' | 'cannot-tell' | 'off';

/**
 * A share against the shop's tolerance: on target when even at the far end it is within, off when even at the near end
 * it is not. @param deviation share less its target @param standard u of the share @param tolerance τ; all shares
 */
export function verdictOf(deviation: number, standard: number, tolerance: number): Verdict {
  if (!Number.isFinite(deviation) || !(standard >= 0) || !(tolerance >= 0))
    throw new UncertaintyError(`A share cannot be judged by ${deviation} ± ${standard} against ${tolerance}.`);
  const expanded = COVERAGE_FACTOR * standard;
  if (Math.abs(deviation) + expanded <= tolerance) return 'on-target';
  return Math.abs(deviation) - expanded > tolerance ? 'off' : 'cannot-tell';
}

/** "Blue is 12.0 %; the scale cannot tell it from 11.9 to 12.1 %." Rounded outwards. @param share 0 to 1 */
export function sayShare(name: string, share: number, standard: number, locale: string): string {
  if (!(share >= 0 && share <= 1) || !(standard >= 0))
    throw new UncertaintyError(`A share is from 0 to 1 and its uncertainty 0 or more, not ${share} and ${standard}.`);
  const expanded = COVERAGE_FACTOR * standard * 100;
  const decimals = expanded === 0 ? 1 : Math.min(4, Math.max(1, Math.ceil(-Math.log10(expanded))));
  const step = 10 ** -decimals;
  const percent = (value: number) =>
    new Intl.NumberFormat(locale, { minimumFractionDigits: decimals, maximumFractionDigits: decimals }).format(value);
  const is = `${name} is ${percent(share * 100)} %`;
  const low = Math.max(0, Math.floor((share * 100 - expanded) / step + 1e-6) * step);
  const high = Math.min(100, Math.ceil((share * 100 + expanded) / step - 1e-6) * step);
  if (low >= high) return `${is}.`;
  return `${is}; the scale cannot tell it from ${percent(low)} to ${percent(high)} %.`;
}
