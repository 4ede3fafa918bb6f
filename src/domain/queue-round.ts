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
/** mg by which floating-point masses are off at most. */
const NEAR = 1e-2;

/** All fresh. @throws FoldInError when the batch cannot be weighed */
export function freshPlan(batch: QueueBatch): BatchPlan {
  return planOf(batch, [], foldInBuckets({ ...batch.ask, buckets: [] }));
}

/** The kernel's plan from just these buckets, near what is `taken` of each candidate (mg); all fresh when there is none. */
export function roundTaken(batch: QueueBatch, taken: Float64Array, limits: Limits, fresh: BatchPlan): BatchPlan {
  const found = planNear(batch, taken, batch.ask.readability, limits) ?? planNear(batch, taken, Infinity, limits);
  return found !== undefined && found.value > fresh.value ? found : fresh;
}

/** What is taken whole must be emptied; the others are offered as if they were larger, so that they never are. */
function planNear(batch: QueueBatch, taken: Float64Array, more: number, { partly, most }: Limits) {
  const rest = batch.search.greatest + 1;
  const offered = batch.search.candidates.flatMap(({ index }, k) => {
    const [mass, whole, part] = [taken[k], most[k], partly[k]] as [number, number, number];
    const mustUse = whole > part && mass >= whole - NEAR;
    const usable = mustUse ? whole : Math.floor(Math.min(mass + NEAR + more, part)) + rest;
    const bucket = batch.search.problem.buckets[index] as Bucket;
    if (mass === 0 || usable <= 0) return [];
    return [{ bucket: { ...bucket, usable: usable as Milligrams, mustUse }, place: batch.buckets[k] as number }];
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
