/** Kilograms with two decimals, in the shop's locale, without the unit. */
export function formatKilograms(mg: number, locale: string): string {
  return new Intl.NumberFormat(locale, { minimumFractionDigits: 2, maximumFractionDigits: 2 }).format(mg / 1e6);
}
