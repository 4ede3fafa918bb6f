import type { FoldInPlan } from './fold-in.ts';
import type { Milligrams } from './mass.ts';
import type { QueuePlans, QueueProblem } from './plan-queue.ts';
import type { QueueBatch } from './queue-batch.ts';
import type { QueuePrices } from './queue-prices.ts';
import type { BatchPlan } from './queue-round.ts';
import type { QueueShelf } from './queue-shelf.ts';

/** Of the batch: what a bound in floating point may err by, and what counts as reached in the search for it. */
const MARGIN = 2e-7;

/** Tells the plans on the shelf as those of the batches. */
export class QueueDescription {
  private told: { plans: readonly (BatchPlan | undefined)[]; found: ReadonlyMap<string, FoldInPlan> } | undefined;

  constructor(
    private readonly problem: QueueProblem,
    private readonly batches: readonly QueueBatch[],
    private readonly shelf: QueueShelf,
    private readonly prices: QueuePrices,
  ) {}

  get found(): QueuePlans {
    const reused = this.sum((plan) => plan.reused);
    return { plans: this.plans(), reused, bound: (reused + this.gap) as Milligrams };
  }

  /** Whether the bound is as near as rounding to the scales' steps allows. */
  get isReached(): boolean {
    const rounding = this.batches.reduce(
      (sum, { ask, place }) => sum + ask.readability * (this.shelf.plans[place]?.takings.length ?? 0),
      0,
    );
    return this.gap <= rounding + this.margin;
  }

  /** mg that better plans could gain. */
  private get gap(): number {
    const bound = Math.ceil(this.prices.bound) + this.margin;
    return Math.max(0, bound - this.sum((plan) => plan.value));
  }

  /** mg */
  private get margin(): number {
    return this.batches.reduce((sum, batch) => sum + marginOf(batch), 0);
  }

  private sum(of: (plan: BatchPlan) => number): Milligrams {
    return this.shelf.plans.reduce((sum, plan) => sum + (plan ? of(plan) : 0), 0) as Milligrams;
  }

  private plans(): ReadonlyMap<string, FoldInPlan> {
    const { plans } = this.shelf;
    if (this.told?.plans.every((plan, place) => plan === plans[place])) return this.told.found;
    const found = new Map(this.batches.map((batch) => [batch.id, this.planOf(batch)]));
    this.told = { plans: [...plans], found };
    return found;
  }

  private planOf(of: QueueBatch): FoldInPlan {
    const { ask, place, search } = of;
    const { value, batch, reused, takings, fresh } = this.shelf.plans[place] as BatchPlan;
    const isRanged = ask.batch.maximum > ask.batch.minimum;
    const start = isRanged ? ask.batch.minimum : 0;
    const alone = Math.ceil(this.prices.alone[place] as number) + marginOf(of);
    const isProven = alone - value <= ask.readability * Math.max(1, takings.length) + marginOf(of);
    const used = new Set(takings.map(({ bucket }) => this.idOf(bucket)));
    return {
      status: !isProven ? 'gap' : used.size === 0 ? 'none' : 'best',
      batch,
      reused,
      objective: (value - start) as Milligrams,
      objectiveBound: (Math.max(value, alone) - start) as Milligrams,
      fromBuckets: takings.map(({ bucket, mass }) => {
        return { bucketId: this.idOf(bucket), mass, empties: this.shelf.emptiedBy(bucket) === place };
      }),
      fresh,
      excluded: search.excluded.filter(({ bucketId }) => !used.has(bucketId)),
    };
  }

  private idOf(bucket: number): string {
    return this.problem.buckets[bucket]?.id ?? '';
  }
}

/** mg */
function marginOf({ buckets, search }: QueueBatch): number {
  return buckets.length === 0 ? 0 : 1 + Math.ceil(MARGIN * search.greatest);
}
