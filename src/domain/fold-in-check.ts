import { CompositionError, requireWhole } from './composition.ts';
import type { FoldInProblem } from './fold-in.ts';

/** A problem that no shop can have; the message says what is wrong with it. */
export class FoldInError extends Error {
  override name = 'FoldInError';
}

/** @throws FoldInError for negative masses, shares that do not add up, ids that come twice, a batch between steps */
export function requireProblem(problem: FoldInProblem): void {
  const { batch, readability: d } = problem;
  if (!isWhole(d) || d === 0) throw new FoldInError(`The scale's step must be whole mg above 0, not ${d}.`);
  for (const key of ['minimumFromBucket', 'minimumFresh', 'sliver', 'worthOpening'] as const) {
    if (!isWhole(problem[key])) throw new FoldInError(`${key} must be whole mg from 0 up, not ${problem[key]}.`);
  }
  for (const mass of [batch.minimum, batch.maximum]) {
    if (!isWhole(mass) || mass === 0 || mass % d !== 0)
      throw new FoldInError(`The batch must be a multiple of ${d} mg, not ${mass}.`);
  }
  if (batch.minimum > batch.maximum) throw new FoldInError('The least batch is above the greatest.');
  if (!Number.isInteger(problem.maximumBuckets) || problem.maximumBuckets < 0) {
    throw new FoldInError(`The number of buckets must be whole from 0 up, not ${problem.maximumBuckets}.`);
  }
  for (const [id, tau] of problem.tolerance) {
    if (!isWhole(tau) || tau > 1e9)
      throw new FoldInError(`The tolerance of ${id} must be 0 to a billion ppb, not ${tau}.`);
  }
  requireShares(problem);
}

function requireShares(problem: FoldInProblem): void {
  const ids = new Set<string>();
  try {
    requireWhole(problem.target);
    for (const bucket of problem.buckets) {
      if (ids.has(bucket.id)) throw new FoldInError(`Bucket ${bucket.id} stands twice.`);
      ids.add(bucket.id);
      if (!isWhole(bucket.usable))
        throw new FoldInError(`Bucket ${bucket.id} must hold whole mg, not ${bucket.usable}.`);
      requireWhole(bucket.composition);
    }
  } catch (error) {
    if (error instanceof CompositionError) throw new FoldInError(error.message, { cause: error });
    throw error;
  }
}

function isWhole(value: number): boolean {
  return Number.isSafeInteger(value) && value >= 0;
}
