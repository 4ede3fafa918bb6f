import { ceilDivide } from './least-error.ts';

/** What is weighed on one scale: whole numbers of its step, from `least` to `most`, best near `wish`. */
export interface StepGroup {
  step: bigint;
  least: bigint;
  most: bigint;
  wish: bigint;
}

/**
 * How many steps of each group add up to `sum`, the coarse ones nearest to their wishes; undefined when none do.
 * @param groups finest first, each step dividing the next
 */
export function splitSum(groups: readonly StepGroup[], sum: bigint): bigint[] | undefined {
  const spans = spansOf(groups, sum);
  if (spans === undefined) return undefined;
  const steps: bigint[] = [];
  let rest = sum;
  for (let n = groups.length - 1; n >= 0; n--) {
    const { step, least, most, wish } = groups[n] as StepGroup;
    const [from, to] = spans[n - 1] ?? [0n, 0n];
    const lowest = larger(least, ceilDivide(rest - to, step));
    const highest = smaller(most, floorDivide(rest - from, step));
    const chosen = larger(lowest, smaller(highest, wish));
    steps.unshift(chosen);
    rest -= chosen * step;
  }
  return steps;
}

/** What each group and all finer ones can weigh together, as far as the coarser steps can make it up to `sum`. */
function spansOf(groups: readonly StepGroup[], sum: bigint): [bigint, bigint][] | undefined {
  const spans: [bigint, bigint][] = [];
  if (sum % (groups[0]?.step ?? 1n) !== 0n) return undefined;
  let [from, to] = [0n, 0n];
  for (const [n, { step, least, most }] of groups.entries()) {
    if (least > most) return undefined;
    from += least * step;
    to += most * step;
    const next = groups[n + 1]?.step ?? step;
    from += modulo(sum - from, next);
    to -= modulo(to - sum, next);
    if (from > to) return undefined;
    spans.push([from, to]);
  }
  return from <= sum && sum <= to ? spans : undefined;
}

function modulo(a: bigint, b: bigint): bigint {
  return ((a % b) + b) % b;
}

function floorDivide(a: bigint, b: bigint): bigint {
  return (a - modulo(a, b)) / b;
}

function larger(a: bigint, b: bigint): bigint {
  return a > b ? a : b;
}

function smaller(a: bigint, b: bigint): bigint {
  return a < b ? a : b;
}
