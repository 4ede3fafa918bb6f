import { type FoldInPlan, type FoldInProblem, foldInBuckets, verifyPlan } from '#domain/fold-in.ts';
import { askHighs } from './bench/ask-highs.ts';
import { foldInMip } from './bench/fold-in-mip.ts';
import { asksOf, nameOf, SIZES, targetOf, warmUp } from './bench/fold-in-rows.ts';
import { type Ask, makeShop } from './bench/fold-in-shop.ts';
import { median, quantile } from './bench/quantile.ts';
import { measureInBrowser } from './bench/run-in-browser.ts';

const SEEDS = Number(process.argv[2] ?? 5);
const HIGHS_SECONDS = 10;
/** A millisecond is measured more than once: the median counts. */
const OWN_RUNS = 3;

interface Run {
  ms: number;
  plan: FoldInPlan;
  verified: boolean;
  highs: { ms: number; finished: boolean; agrees: boolean; difference: number };
}

async function runOne(ask: Ask, seed: number): Promise<Run> {
  const problem = makeShop(seed, ask);
  const times: number[] = [];
  let plan = foldInBuckets(problem);
  for (let n = 0; n < OWN_RUNS; n++) {
    const started = performance.now();
    plan = foldInBuckets(problem);
    times.push(performance.now() - started);
  }
  return { ms: median(times), plan, verified: verifyPlan(problem, plan).ok, highs: await compare(problem, plan) };
}

/** Equal within 10⁻⁶ and a step of the scale for each bucket that is opened (one for the fresh ink). */
async function compare(problem: FoldInProblem, plan: FoldInPlan): Promise<Run['highs']> {
  const { ms, finished, objective } = await askHighs(foldInMip(problem), HIGHS_SECONDS);
  const difference = plan.objective - objective * 1000;
  const rounding = problem.readability * (plan.fromBuckets.length + 1);
  const isBelow = plan.objectiveBound < objective * 1000 * (1 - 1e-6) - 1;
  const agrees = Math.abs(difference) <= Math.abs(plan.objective) * 1e-6 + rounding && !isBelow;
  return { ms, finished, agrees: !finished || agrees, difference };
}

function report(ask: Ask, runs: readonly Run[]): void {
  const times = runs.map((run) => run.ms);
  const p95 = quantile(times, 0.95);
  const target = targetOf(ask);
  const verdict = target === undefined ? '' : ` (target ${target} ms: ${p95 <= target ? 'met' : 'missed'})`;
  const proven = runs.filter(({ plan }) => plan.status !== 'gap').length;
  const ratio = median(runs.map((run) => run.highs.ms / run.ms));
  console.log(
    `${nameOf(ask)}: p50 ${median(times).toFixed(1)} ms, p95 ${p95.toFixed(1)} ms${verdict}; ` +
      `proven ${proven}/${runs.length}, verified ${runs.filter((run) => run.verified).length}/${runs.length}; ` +
      `HiGHS p50 ${median(runs.map((run) => run.highs.ms)).toFixed(0)} ms, ${ratio.toFixed(0)} times as long`,
  );
  for (const [n, { highs }] of runs.entries())
    if (!highs.agrees) console.log(`  seed ${n + 1}: ${(highs.difference / 1000).toFixed(3)} g off HiGHS`);
}

console.log(
  `Fold-in beside HiGHS (WebAssembly, gap 10⁻⁹, ${HIGHS_SECONDS} s), ${SEEDS} seeded shops a row, own median of ${OWN_RUNS}, Node ${process.version}`,
);
warmUp((problem) => foldInBuckets(problem));
const all: Run[] = [];
for (const ask of SIZES.flatMap(asksOf)) {
  const runs: Run[] = [];
  for (let seed = 1; seed <= SEEDS; seed++) runs.push(await runOne(ask, seed));
  report(ask, runs);
  all.push(...runs);
}
const finished = all.filter((run) => run.highs.finished);
const agreeing = finished.filter((run) => run.highs.agrees).length;
const ratio = median(all.map((run) => run.highs.ms / run.ms));
console.log(
  `HiGHS finished ${finished.length} of ${all.length} (at least 95 %: ${finished.length >= 0.95 * all.length ? 'met' : 'missed'})`,
);
console.log(
  `Equal objective on ${agreeing} of those ${finished.length}: ${agreeing === finished.length ? 'met' : 'missed'}`,
);
console.log(
  `HiGHS takes ${ratio.toFixed(0)} times as long, median of ${all.length} (at least 50: ${ratio >= 50 ? 'met' : 'missed'})`,
);

/** p95 in ms that core mathematics A asks of 500 buckets and K ≤ 3 on a phone. */
const PHONE_TARGET = 600;
console.log('The same shops in headless Chromium at a quarter of the speed');
const phone = await measureInBrowser(SEEDS, 4);
for (const [n, ask] of SIZES.flatMap(asksOf).entries()) {
  const times = phone[n] ?? [];
  const p95 = quantile(times, 0.95);
  const isAsked = ask.buckets === 500 && ask.maximumBuckets <= 3;
  const verdict = isAsked ? ` (target ${PHONE_TARGET} ms: ${p95 <= PHONE_TARGET ? 'met' : 'missed'})` : '';
  console.log(`${nameOf(ask)}: p50 ${median(times).toFixed(1)} ms, p95 ${p95.toFixed(1)} ms${verdict}`);
}
