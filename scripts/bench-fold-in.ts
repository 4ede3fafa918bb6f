import { type FoldInPlan, foldInBuckets, verifyPlan } from '#domain/fold-in.ts';
import type { Milligrams } from '#domain/mass.ts';
import { type Ask, makeShop } from './bench/fold-in-shop.ts';

const SEEDS = Number(process.argv[2] ?? 20);
const grams = (mass: number) => (mass * 1000) as Milligrams;

const asks: Ask[] = [20, 120, 500].flatMap((buckets) =>
  [false, true].flatMap((tolerance) =>
    [2, 6].flatMap((maximumBuckets) =>
      [0, 100].map((worth) => ({ buckets, tolerance, maximumBuckets, worthOpening: grams(worth) })),
    ),
  ),
);

interface Run {
  ms: number;
  plan: FoldInPlan;
  verified: boolean;
}

function runOne(ask: Ask, seed: number): Run {
  const problem = makeShop(seed, ask);
  const started = performance.now();
  const plan = foldInBuckets(problem);
  return { ms: performance.now() - started, plan, verified: verifyPlan(problem, plan).ok };
}

function quantile(values: readonly number[], q: number): string {
  const sorted = [...values].sort((a, b) => a - b);
  return (sorted[Math.min(sorted.length - 1, Math.floor(q * sorted.length))] ?? Number.NaN).toFixed(1);
}

function report(ask: Ask, runs: readonly Run[]): void {
  const count = (status: FoldInPlan['status']) => runs.filter((run) => run.plan.status === status).length;
  const times = runs.map((run) => run.ms);
  const gaps = runs.map(({ plan }) => plan.objectiveBound - plan.objective);
  console.log(
    `N=${ask.buckets} ${ask.tolerance ? 'tolerance  ' : 'same recipe'} K=${ask.maximumBuckets} κ=${ask.worthOpening / 1000} g: ` +
      `p50 ${quantile(times, 0.5)} ms, p95 ${quantile(times, 0.95)} ms, most ${quantile(times, 1)} ms; ` +
      `best ${count('best')}, gap ${count('gap')} (most ${(Math.max(...gaps) / 1000).toFixed(2)} g), none ${count('none')}; ` +
      `verified ${runs.filter((run) => run.verified).length} of ${runs.length}`,
  );
}

console.log(`Fold-in, ${SEEDS} seeded shops a row, Node ${process.version}`);
for (let warm = 0; warm < 10; warm++) runOne(asks[warm % asks.length] as Ask, 1000 + warm);
for (const ask of asks)
  report(
    ask,
    Array.from({ length: SEEDS }, (_, seed) => runOne(ask, seed + 1)),
  );
