/** One amount to be shown in whole steps: `need`/`denominator` steps, within whole bounds. */
export interface Need {
  need: bigint;
  lower: bigint;
  upper: bigint;
}

interface Candidate {
  /** Relative error |w·denominator − need| / need. */
  error: bigint;
  need: bigint;
}

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
  const candidates = needs.flatMap((entry) => candidatesOf(entry, denominator)).sort(compareErrors);
  let low = 0;
  let high = candidates.length - 1;
  if (high < 0 || !reaches(needs, denominator, sum, candidates[high] as Candidate)) return undefined;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (reaches(needs, denominator, sum, candidates[middle] as Candidate)) high = middle;
    else low = middle + 1;
  }
  const worst = candidates[low] as Candidate;
  const steps = share(needs, denominator, sum, worst);
  return { steps, worst: worst.need === 0n ? 0 : Number(worst.error) / Number(worst.need) };
}

function candidatesOf({ need, lower, upper }: Need, denominator: bigint): Candidate[] {
  const list: Candidate[] = [{ error: 0n, need: 1n }];
  if (need === 0n) return list;
  for (let w = lower; w <= upper; w++) {
    const error = w * denominator - need;
    list.push({ error: error < 0n ? -error : error, need });
  }
  return list;
}

function compareErrors(a: Candidate, b: Candidate): number {
  const left = a.error * b.need;
  const right = b.error * a.need;
  return left < right ? -1 : left > right ? 1 : 0;
}

/** Bounds of the steps of one need when its relative error may be at most `limit`. */
function window({ need, lower, upper }: Need, denominator: bigint, limit: Candidate): [bigint, bigint] {
  if (need === 0n) return [lower, upper];
  const slack = need * limit.error;
  const least = ceilDivide(need * limit.need - slack, denominator * limit.need);
  const most = (need * limit.need + slack) / (denominator * limit.need);
  return [least > lower ? least : lower, most < upper ? most : upper];
}

function reaches(needs: readonly Need[], denominator: bigint, sum: bigint, limit: Candidate): boolean {
  let least = 0n;
  let most = 0n;
  for (const entry of needs) {
    const [from, to] = window(entry, denominator, limit);
    if (from > to) return false;
    least += from;
    most += to;
  }
  return least <= sum && sum <= most;
}

/** Nearest steps within the windows, then single steps where they cost the least relative error. */
function share(needs: readonly Need[], denominator: bigint, sum: bigint, limit: Candidate): bigint[] {
  const windows = needs.map((entry) => window(entry, denominator, limit));
  const steps = needs.map(({ need }, n) => {
    const [from, to] = windows[n] as [bigint, bigint];
    const nearest = (2n * need + denominator) / (2n * denominator);
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

function cheapestMove(
  needs: readonly Need[],
  denominator: bigint,
  steps: readonly bigint[],
  windows: readonly [bigint, bigint][],
  by: bigint,
): number {
  let best: { n: number; cost: Candidate } | undefined;
  needs.forEach(({ need }, n) => {
    const next = (steps[n] as bigint) + by;
    const [from, to] = windows[n] as [bigint, bigint];
    if (next < from || next > to) return;
    const off = next * denominator - need;
    const cost = need === 0n ? { error: 1n, need: 1n } : { error: off < 0n ? -off : off, need };
    if (best === undefined || compareErrors(cost, best.cost) < 0) best = { n, cost };
  });
  if (best === undefined) throw new Error('The windows reach the sum, so a move must exist.');
  return best.n;
}

export function ceilDivide(a: bigint, b: bigint): bigint {
  const quotient = a / b;
  return a % b > 0n ? quotient + 1n : quotient;
}
