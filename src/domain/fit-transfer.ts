import { InkNeedError, type Range } from './ink-range.ts';
import type { Milligrams } from './mass.ts';

/** `likely` by least squares over all runs; median and 10 to 90 % of what each run says by itself. */
export interface Spread extends Range {
  median: number;
}

/** A weighed run, or a job by what was issued and came back. */
export interface InkRun {
  /** mg that all its prints would take at transfer 1. */
  theoretical: Milligrams;
  prints: number;
  screens: number;
  /** mg that it took: bucket, screens and tools, before less after. */
  used: Milligrams;
}

/** With fewer, a default that is called a guess says more. */
const FEWEST_RUNS = 5;
/** 1 − cos² of prints against screens, below which runs do not tell what stuck to the screen from what went through. */
const TOLD_APART = 1e-3;

/**
 * Transfer (a share) and loss in a screen (mg), fitted apart by least squares: used = transfer·theoretical +
 * loss·screens, neither below 0. 'too-few-runs' also where all runs have the same prints for each screen, since then
 * the two cannot be told apart. @throws InkNeedError
 */
export function fitTransfer(runs: readonly InkRun[]): { transfer: Spread; screenLoss: Spread } | 'too-few-runs' {
  for (const run of runs) requireRun(run);
  if (runs.length < FEWEST_RUNS) return 'too-few-runs';
  const fitted = leastSquares(runs);
  if (fitted === undefined) return 'too-few-runs';
  const { transfer, loss } = fitted;
  const transfers = runs.map((run) => Math.max(0, run.used - loss * run.screens) / run.theoretical);
  const losses = runs
    .filter((run) => run.screens > 0)
    .map((run) => Math.max(0, run.used - transfer * run.theoretical) / run.screens);
  return { transfer: spreadOf(transfer, transfers), screenLoss: spreadOf(loss, losses) };
}

function requireRun({ theoretical, prints, screens, used }: InkRun): void {
  const isWhole = (value: number) => Number.isSafeInteger(value) && value >= 0;
  if (!isWhole(theoretical) || theoretical === 0)
    throw new InkNeedError(`A run's theoretical ink is whole mg above 0, not ${theoretical}.`);
  if (!isWhole(prints) || prints === 0) throw new InkNeedError(`A run has at least one print, not ${prints}.`);
  if (!isWhole(screens)) throw new InkNeedError(`A run has a whole number of screens, not ${screens}.`);
  if (!isWhole(used)) throw new InkNeedError(`A run used whole mg from 0 up, not ${used}. Weigh it again.`);
}

function leastSquares(runs: readonly InkRun[]): { transfer: number; loss: number } | undefined {
  const sum = (of: (run: InkRun) => number) => runs.reduce((total, run) => total + of(run), 0);
  const tt = sum((run) => run.theoretical ** 2);
  const ts = sum((run) => run.theoretical * run.screens);
  const ss = sum((run) => run.screens ** 2);
  const tu = sum((run) => run.theoretical * run.used);
  const su = sum((run) => run.screens * run.used);
  const determinant = tt * ss - ts * ts;
  if (determinant <= TOLD_APART * tt * ss) return undefined;
  const transfer = (ss * tu - ts * su) / determinant;
  const loss = (tt * su - ts * tu) / determinant;
  if (loss < 0) return { transfer: tu / tt, loss: 0 };
  if (transfer < 0) return { transfer: 0, loss: su / ss };
  return { transfer, loss };
}

function spreadOf(likely: number, values: readonly number[]): Spread {
  const [low, median, high] = [0.1, 0.5, 0.9].map((share) => quantile(values, share)) as [number, number, number];
  // Few runs, far off: the fit stays within what is shown.
  return { low: Math.min(low, likely), likely, median, high: Math.max(high, likely) };
}

/** Linear between the values in order. */
function quantile(values: readonly number[], share: number): number {
  const sorted = values.toSorted((a, b) => a - b);
  const at = share * (sorted.length - 1);
  const below = sorted[Math.floor(at)] ?? 0;
  return below + (at - Math.floor(at)) * ((sorted[Math.ceil(at)] ?? below) - below);
}
