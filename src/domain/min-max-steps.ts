import { type ErrorLimit, type Need, ceilDivide, leastError, relativeError, windowOf } from './least-error.ts';

export { type Need, ceilDivide };

/**
 * Whole steps that add up to `sum`, with the smallest worst relative error (min-max, exact).
 * @param needs in units of 1/denominator step; a need of 0 keeps to its bounds and has no error
 * @returns the steps and the worst relative error, or undefined when the bounds cannot reach the sum
 */
export function minMaxSteps(
  needs: readonly Need[],
  denominator: bigint,
  sum: bigint,
): { steps: bigint[]; worst: number } | undefined {
  const worst = leastError(needs, denominator, (limit) => reaches(needs, denominator, sum, limit));
  if (worst === undefined) return undefined;
  return { steps: shareOut(needs, denominator, sum, worst), worst: relativeError(worst) };
}

function reaches(needs: readonly Need[], denominator: bigint, sum: bigint, limit: ErrorLimit): boolean {
  let least = 0n;
  let most = 0n;
  for (const entry of needs) {
    const [from, to] = windowOf(entry, denominator, limit);
    if (from > to) return false;
    least += from;
    most += to;
  }
  return least <= sum && sum <= most;
}

/** Nearest steps within the windows of `limit`, then single steps where they cost the least relative error. */
export function shareOut(needs: readonly Need[], denominator: bigint, sum: bigint, limit: ErrorLimit): bigint[] {
  const windows = needs.map((entry) => windowOf(entry, denominator, limit));
  const steps = needs.map((entry, n) => {
    const [from, to] = windows[n] as [bigint, bigint];
    const nearest = nearestStep(entry, denominator);
    return nearest < from ? from : nearest > to ? to : nearest;
  });
  let missing = sum - steps.reduce((a, b) => a + b, 0n);
  while (missing !== 0n) {
    const by = missing > 0n ? 1n : -1n;
    const n = cheapestMove(needs, denominator, steps, windows, by);
    steps[n] = (steps[n] as bigint) + by;
    missing -= by;
  }
  return steps;
}

/** Halves go up. */
export function nearestStep({ need }: Need, denominator: bigint): bigint {
  return (2n * need + denominator) / (2n * denominator);
}

function cheapestMove(
  needs: readonly Need[],
  denominator: bigint,
  steps: readonly bigint[],
  windows: readonly [bigint, bigint][],
  by: bigint,
): number {
  let best: { n: number; cost: ErrorLimit } | undefined;
  needs.forEach(({ need }, n) => {
    const next = (steps[n] as bigint) + by;
    const [from, to] = windows[n] as [bigint, bigint];
    if (next < from || next > to) return;
    const off = next * denominator - need;
    const cost = need === 0n ? { error: 1n, need: 1n } : { error: off < 0n ? -off : off, need };
    if (best === undefined || cost.error * best.cost.need < best.cost.error * cost.need) best = { n, cost };
  });
  if (best === undefined) throw new Error('The windows reach the sum, so a move must exist.');
  return best.n;
}
