/** One amount to be shown in whole steps: `need`/`denominator` steps, within whole bounds. */
export interface Need {
  need: bigint;
  lower: bigint;
  upper: bigint;
}

/** A relative error `error`/`need`, exact. */
export interface ErrorLimit {
  error: bigint;
  need: bigint;
}

const NONE: ErrorLimit = { error: 0n, need: 1n };
/** Bisection halves until so few errors are left; these are then told apart exactly. */
const FEW = 64;
const FINE = 2n ** 60n;

/**
 * The smallest relative error that `fits`, which must fit all greater ones too: exact, since it is the error of one of
 * the whole steps. Undefined when even the bounds do not fit.
 * @param needs in units of 1/denominator step
 */
export function leastError(
  needs: readonly Need[],
  denominator: bigint,
  fits: (limit: ErrorLimit) => boolean,
): ErrorLimit | undefined {
  const greatest = greatestError(needs, denominator);
  if (!fits(greatest)) return undefined;
  if (fits(NONE)) return NONE;
  const between = stepCounter(needs, denominator);
  let low = 0n;
  let high = ceilDivide(greatest.error * FINE, greatest.need);
  while (high - low > 1n && between(high - low) > FEW) {
    const middle = (low + high) / 2n;
    if (fits(fine(middle))) high = middle;
    else low = middle;
  }
  return firstThatFits(errorsBetween(needs, denominator, fine(low), fine(high)), fits);
}

export function relativeError({ error, need }: ErrorLimit): number {
  return Number(error) / Number(need);
}

/** Least and most steps of one need when its relative error may be at most `limit`; least > most: none. */
export function windowOf({ need, lower, upper }: Need, denominator: bigint, limit: ErrorLimit): [bigint, bigint] {
  if (need === 0n) return [lower, upper];
  const whole = need * limit.need;
  const slack = need * limit.error;
  const unit = denominator * limit.need;
  const least = slack >= whole ? 0n : ceilDivide(whole - slack, unit);
  const most = (whole + slack) / unit;
  return [least > lower ? least : lower, most < upper ? most : upper];
}

export function ceilDivide(a: bigint, b: bigint): bigint {
  const quotient = a / b;
  return a % b > 0n ? quotient + 1n : quotient;
}

function fine(error: bigint): ErrorLimit {
  return { error, need: FINE };
}

function errorOf(steps: bigint, need: bigint, denominator: bigint): ErrorLimit {
  const error = steps * denominator - need;
  return { error: error < 0n ? -error : error, need };
}

function greatestError(needs: readonly Need[], denominator: bigint): ErrorLimit {
  let greatest = NONE;
  for (const { need, lower, upper } of needs) {
    if (need === 0n) continue;
    for (const bound of [lower, upper]) {
      const error = errorOf(bound, need, denominator);
      if (compareErrors(error, greatest) > 0) greatest = error;
    }
  }
  return greatest;
}

/** About how many steps have errors in an interval of so many 1/FINE. */
function stepCounter(needs: readonly Need[], denominator: bigint): (width: bigint) => number {
  const sizes = needs.map(({ need }) => (2 * Number(need)) / Number(denominator));
  const spans = needs.map(({ need, lower, upper }) => (need === 0n ? 0 : Number(upper - lower)));
  return (width) => {
    const part = Number(width) / Number(FINE);
    return sizes.reduce((sum, size, n) => sum + Math.min(size * part, spans[n] as number), 0);
  };
}

/** The errors above `low` and up to `high` that steps within the bounds have, smallest first. */
function errorsBetween(
  needs: readonly Need[],
  denominator: bigint,
  low: ErrorLimit,
  high: ErrorLimit,
): readonly ErrorLimit[] {
  const errors: ErrorLimit[] = [];
  for (const entry of needs) {
    if (entry.need === 0n) continue;
    const [from, to] = windowOf(entry, denominator, high);
    const [least, most] = windowOf(entry, denominator, low);
    const add = (steps: bigint) => errors.push(errorOf(steps, entry.need, denominator));
    for (let steps = from; steps <= to && steps < least; steps++) add(steps);
    for (let steps = most + 1n > from ? most + 1n : from; steps <= to; steps++) add(steps);
  }
  return errors.sort(compareErrors);
}

/** @param errors smallest first; the last one fits */
function firstThatFits(errors: readonly ErrorLimit[], fits: (limit: ErrorLimit) => boolean): ErrorLimit | undefined {
  let low = 0;
  let high = errors.length - 1;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (fits(errors[middle] as ErrorLimit)) high = middle;
    else low = middle + 1;
  }
  return errors[low];
}

function compareErrors(a: ErrorLimit, b: ErrorLimit): number {
  const left = a.error * b.need;
  const right = b.error * a.need;
  return left < right ? -1 : left > right ? 1 : 0;
}
