import { FoldInError } from './fold-in-check.ts';
import type { QueuePlans, QueueProblem } from './plan-queue.ts';
import { prepareBatch } from './queue-batch.ts';
import { told } from './queue-check.ts';
import { QueueDescription } from './queue-describe.ts';
import { QueuePrices } from './queue-prices.ts';
import { type Must, QueueRecreation } from './queue-recreate.ts';
import { freshPlan } from './queue-round.ts';
import { QueueShelf } from './queue-shelf.ts';

/** Turns for each batch without a better plan after which the search ends, and at least. */
const IDLE_EACH = 12;
const IDLE_LEAST = 60;
/** Prices first, then plans at these prices; then better prices and better plans by turns. */
export function* planWeek(problem: QueueProblem): Generator<QueuePlans, QueuePlans> {
  const musts = mustsOf(problem);
  const { batches, prices, recreation, description } = prepareWeek(problem, musts);
  const rounds = prices.rounds();
  while (prices.round === 0) rounds.next();
  recreation.planAll();
  const most = IDLE_LEAST + IDLE_EACH * batches.length;
  let isPriced = false;
  for (let idle = 0; idle < most || (!isPriced && recreation.isEmptied);) {
    const found = recreation.isEmptied ? description.found : undefined;
    if (found !== undefined) yield found;
    if (found !== undefined && description.isReached) return found;
    const turn = recreation.turn();
    let step = turn.next();
    for (; !step.done; step = turn.next()) {
      isPriced ||= rounds.next().done === true;
      // What is on the shelf in between is no whole week.
      if (found !== undefined) yield found;
    }
    idle = step.value ? 0 : idle + 1;
  }
  if (recreation.isEmptied) return description.found;
  const names = musts.map(({ bucket }) => problem.buckets[bucket]?.id).join(', ');
  throw new FoldInError(`No plans were found for these batches that use up what must be (${names}): allow it to stay.`);
}

function prepareWeek(problem: QueueProblem, musts: readonly Must[]) {
  const usable = problem.buckets.map((bucket) => bucket.usable);
  const batches = problem.batches.map((_, place) => prepareBatch(problem, place));
  const fresh = batches.map((batch) => told(`Batch ${batch.id}`, () => freshPlan(batch)));
  const prices = new QueuePrices(batches, usable, new Set(musts.map(({ bucket }) => bucket)));
  const shelf = new QueueShelf(usable, batches);
  const recreation = new QueueRecreation(batches, shelf, prices, fresh, musts);
  return { batches, prices, recreation, description: new QueueDescription(problem, batches, shelf, prices) };
}

function mustsOf({ batches, buckets }: QueueProblem): Must[] {
  const all = batches.reduce((sum, { batch }) => sum + batch.maximum, 0);
  return buckets.flatMap(({ mustUse, usable }, bucket) =>
    mustUse && usable > 0 ? [{ bucket, price: 1 + (10 * all) / usable }] : [],
  );
}
