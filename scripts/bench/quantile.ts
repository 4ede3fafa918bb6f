/** Of numbers that need no order; NaN of none. @param q 0 to 1 */
export function quantile(values: readonly number[], q: number): number {
  const sorted = [...values].sort((a, b) => a - b);
  return sorted[Math.min(sorted.length - 1, Math.floor(q * sorted.length))] ?? Number.NaN;
}

export const median = (values: readonly number[]) => quantile(values, 0.5);
