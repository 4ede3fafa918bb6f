import { type FoldInProblem, foldInBuckets } from './fold-in.ts';
import { FoldInError } from './fold-in-check.ts';
import type { Milligrams } from './mass.ts';
import type { Limits, QueueBatch } from './queue-batch.ts';

/** One batch's plan on the scale's steps; buckets by where they stand on the shelf. */
export interface BatchPlan {
  /** mg: reused − κ·buckets, and in a range less what the batch is above its least: what it gains over fresh ink. */
  value: number;
  batch: Milligrams;
  reused: Milligrams;
  takings: readonly { bucket: number; mass: Milligrams }[];
  fresh: ReadonlyMap<string, Milligrams>;
}

type Bucket = FoldInProblem['buckets'][number];

/** All fresh. @throws FoldInError when the batch cannot be weighed */
export function freshPlan(batch: QueueBatch): BatchPlan {
  return planOf(batch, [], foldInBuckets({ ...batch.ask, buckets: [] }));
}

/** The kernel's plan from just these buckets, of which it takes no more than `taken` (mg of each candidate). */
export function roundTaken(batch: QueueBatch, taken: Float64Array, limits: Limits, fresh: BatchPlan): BatchPlan {
  const near = taken.map((mass) => Math.ceil(mass) + (mass === 0 ? 0 : batch.ask.readability));
  const found =
    planWithin(batch, near, limits) ??
    planWithin(
      batch,
      near.map((mass) => mass && Infinity),
      limits,
    );
  return found !== undefined && found.value > fresh.value ? found : fresh;
}

/** What is taken whole must be emptied; the others are offered as if they were larger, so that they never are. */
function planWithin(batch: QueueBatch, within: Float64Array, { partly, most }: Limits): BatchPlan | undefined {
  const rest = batch.search.greatest + 1;
  const offered = batch.search.candidates.flatMap(({ index }, k) => {
    const mustUse = (within[k] as number) >= (most[k] as number) && (most[k] as number) > (partly[k] as number);
    const mass = mustUse ? (most[k] as number) : Math.floor(Math.min(within[k] as number, partly[k] as number));
    const usable = (mustUse ? mass : mass + rest) as Milligrams;
    const bucket = batch.search.problem.buckets[index] as Bucket;
    return mass <= 0 ? [] : [{ bucket: { ...bucket, usable, mustUse }, place: batch.buckets[k] as number }];
  });
  const buckets = offered.map(({ bucket }) => bucket);
  const found = tryFoldIn({ ...batch.ask, buckets, sliver: rest as Milligrams });
  return found && planOf(batch, offered, found);
}

function tryFoldIn(problem: FoldInProblem) {
  try {
    return foldInBuckets(problem);
  } catch (error) {
    if (error instanceof FoldInError) return undefined;
    throw error;
  }
}

function planOf(
  { ask }: QueueBatch,
  offered: readonly { bucket: Bucket; place: number }[],
  { batch, reused, fromBuckets, fresh }: ReturnType<typeof foldInBuckets>,
): BatchPlan {
  const places = new Map(offered.map(({ bucket, place }) => [bucket.id, place]));
  const takings = fromBuckets.map(({ bucketId, mass }) => ({ bucket: places.get(bucketId) as number, mass }));
  const isRanged = ask.batch.maximum > ask.batch.minimum;
  const above = isRanged ? batch - ask.batch.minimum : 0;
  return { value: reused - above - ask.worthOpening * takings.length, batch, reused, takings, fresh };
}
