import { type QueuePlans, type QueueProblem, searchQueue, verifyQueue } from '#domain/plan-queue.ts';
import type { Milligrams } from '#domain/mass.ts';
import { askHighs } from './bench/ask-highs.ts';
import { PROGRAM_UNIT, queueMip } from './bench/queue-mip.ts';
import { makeQueueShop, type QueueAsk } from './bench/queue-shop.ts';

const SEEDS = Number(process.argv[2] ?? 1);
const MOST_BUCKETS = 4;
const SEARCH_MS = 6000;
const HIGHS_SECONDS = 20;
/** What core mathematics D asks of 500 buckets and 40 batches. */
const FIRST_MS = 1200;
const MOST_GAP = { tolerance: 0.01, sameRecipe: 0.025 };

interface Run {
  firstMs: number;
  found: QueuePlans;
  /** Between two yields. */
  longestMs: number;
  verified: boolean;
}

function searchFor(problem: QueueProblem, mostMs: number): Run {
  const started = performance.now();
  const search = searchQueue(problem);
  let firstMs = 0;
  let longestMs = 0;
  let before = started;
  for (;;) {
    const step = search.next();
    const now = performance.now();
    if (firstMs === 0) firstMs = now - started;
    else longestMs = Math.max(longestMs, now - before);
    before = now;
    if (!step.done && now - started < mostMs) continue;
    const found = step.value;
    return { firstMs, found, longestMs, verified: verifyQueue(problem, found.plans).ok };
  }
}

function verdict(isMet: boolean): string {
  return isMet ? 'met' : 'missed';
}

const kilograms = (mass: number) => `${(mass / 1e6).toFixed(2)} kg`;

async function runOne(ask: QueueAsk, seed: number): Promise<void> {
  const problem = makeQueueShop(seed, ask);
  const { firstMs, found, longestMs, verified } = searchFor(problem, SEARCH_MS);
  const gap = (found.bound - found.reused) / found.bound;
  const most = ask.tolerance ? MOST_GAP.tolerance : MOST_GAP.sameRecipe;
  const highs = await askHighs(queueMip(problem), HIGHS_SECONDS);
  // Without a plan yet it tells an infinite objective.
  const theirs = Number.isFinite(highs.objective) ? Math.max(0, highs.objective * PROGRAM_UNIT) : 0;
  const asked = problem.batches.reduce((sum, { batch }) => sum + batch.minimum, 0);
  console.log(
    `${ask.tolerance ? 'tolerance  ' : 'same recipe'}, fresh from ${ask.minimumFresh / 1000} g, seed ${seed}, batches of ${kilograms(asked)}: ` +
      `first plans ${firstMs.toFixed(0)} ms (${verdict(firstMs <= FIRST_MS)}), longest step ${longestMs.toFixed(0)} ms; ` +
      `at ${SEARCH_MS / 1000} s reused ${kilograms(found.reused)}, gap ${(100 * gap).toFixed(2)} % ` +
      `(at most ${(100 * most).toFixed(1)} %: ${verdict(gap <= most)}), ${verified ? 'verified' : 'NOT VERIFIED'}; ` +
      `HiGHS ${(highs.ms / 1000).toFixed(0)} s ${theirs === 0 ? 'no plan yet' : kilograms(theirs)} (${verdict(found.reused >= theirs)})`,
  );
}

console.log(
  `The week's queue: 500 buckets, 40 batches, K = ${MOST_BUCKETS}, κ = 0, ${SEEDS} seeded shops a row; ` +
    `HiGHS (WebAssembly) on the same for ${HIGHS_SECONDS} s, Node ${process.version}`,
);
const shop = { buckets: 500, batches: 40, maximumBuckets: MOST_BUCKETS, worthOpening: 0 as Milligrams };
// Without a least amount of fresh ink the general solver finds plans far sooner.
for (const minimumFresh of [2000, 0] as Milligrams[])
  for (const tolerance of [true, false])
    for (let seed = 1; seed <= SEEDS; seed++) await runOne({ ...shop, tolerance, minimumFresh }, seed);
