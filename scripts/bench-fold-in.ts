import { compositionFromMasses } from '#domain/composition.ts';
import { type FoldInProblem, foldInBuckets, verifyPlan } from '#domain/fold-in.ts';
import type { Milligrams, PartsPerBillion } from '#domain/mass.ts';
import { type Random, seededRandom } from './seed/random.ts';

/** Fold-in on seeded shops: how many instances, plans proven, verified, and the spread of times in this one run. */
const INSTANCES = 40;
const COMPONENTS = 24;

for (const buckets of [20, 100]) {
  for (const [kind, tau] of [
    ['same recipe', 0],
    ['within tolerance', 0.02],
  ] as const) {
    report(buckets, kind, tau);
  }
}

function report(buckets: number, kind: string, tau: number): void {
  const random = seededRandom(buckets * 7 + Math.round(tau * 1000));
  const times: number[] = [];
  const counts = { best: 0, gap: 0, none: 0, verified: 0 };
  for (let n = 0; n < INSTANCES; n++) {
    const problem = makeProblem(random, buckets, tau);
    const started = performance.now();
    const plan = foldInBuckets(problem);
    times.push(performance.now() - started);
    counts[plan.status] += 1;
    if (verifyPlan(problem, plan).ok) counts.verified += 1;
  }
  times.sort((a, b) => a - b);
  const at = (part: number) => (times[Math.floor((times.length - 1) * part)] ?? 0).toFixed(1);
  console.log(
    `${buckets} buckets, ${kind}: ${JSON.stringify(counts)} of ${INSTANCES}, ms p50 ${at(0.5)} p95 ${at(0.95)}`,
  );
}

/** Colours of a few pigments in base and white, and leftovers that are lighter, deeper or of another colour. */
function makeProblem(random: Random, count: number, tau: number): FoldInProblem {
  const colours = Array.from({ length: 12 }, () =>
    Array.from({ length: random.int(1, 4) }, () => random.int(2, COMPONENTS - 1)),
  );
  const mixOf = (pigments: readonly number[], depth: number) => {
    const parts = new Map<string, number>([
      ['c0', 700_000],
      ['c1', 200_000],
    ]);
    for (const pigment of pigments) parts.set(`c${pigment}`, Math.round(30_000 * depth) + random.int(0, 200));
    return compositionFromMasses([...parts].map(([componentId, mass]) => ({ componentId, mass: mass as Milligrams })));
  };
  const wanted = colours[0] as number[];
  const target = mixOf(wanted, 1);
  const tolerance = new Map([...target].map(([id, share]) => [id, Math.floor(share * tau) as PartsPerBillion]));
  return {
    target,
    batch: { minimum: 850_000 as Milligrams, maximum: 850_000 as Milligrams },
    buckets: Array.from({ length: count }, (_, n) => ({
      id: `b${n}`,
      usable: (random.int(300, 9000) * 100) as Milligrams,
      composition: mixOf(n % 4 === 0 ? wanted : random.pick(colours), 0.2 + random.next() * 1.4),
    })),
    tolerance: tau === 0 ? new Map() : tolerance,
    readability: 100 as Milligrams,
    minimumFromBucket: 20_000 as Milligrams,
    minimumFresh: 2000 as Milligrams,
    sliver: 20_000 as Milligrams,
    maximumBuckets: 2,
    worthOpening: 100_000 as Milligrams,
  };
}
