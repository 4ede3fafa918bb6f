/**
 * Largest remainder (Hamilton): whole numbers in proportion to `amounts` that add up to `sum`; of equal remainders the
 * earlier one is rounded up.
 */
export function roundToSum(amounts: readonly bigint[], total: bigint, sum: number): number[] {
  const exact = amounts.map((amount) => amount * BigInt(sum));
  const floors = exact.map((value) => Number(value / total));
  const missing = sum - floors.reduce((a, b) => a + b, 0);
  const byRemainder = exact
    .map((value, n) => ({ n, remainder: value % total }))
    .sort((a, b) => (a.remainder === b.remainder ? a.n - b.n : a.remainder > b.remainder ? -1 : 1));
  for (const { n } of byRemainder.slice(0, missing)) floors[n] = (floors[n] ?? 0) + 1;
  return floors;
}
