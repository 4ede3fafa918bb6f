import type { Limits, QueueBatch } from './queue-batch.ts';
import type { BatchPlan } from './queue-round.ts';

/** What the batches take of each bucket, all in whole mg, and the rules of sharing one. */
export class QueueShelf {
  /** mg that nobody takes. */
  readonly left: Float64Array;
  /** Of each bucket: batch → mg. */
  private readonly takers: readonly Map<number, number>[];
  readonly plans: (BatchPlan | undefined)[];

  /** mg: what stays of a bucket after all batches is nothing or at least this. */
  private readonly sliver: number;

  constructor(
    usable: readonly number[],
    private readonly batches: readonly QueueBatch[],
  ) {
    this.sliver = batches.reduce((most, { ask }) => Math.max(most, ask.sliver), 1);
    this.left = Float64Array.from(usable);
    this.takers = usable.map(() => new Map());
    this.plans = batches.map(() => undefined);
  }

  put(place: number, plan: BatchPlan): void {
    this.plans[place] = plan;
    for (const { bucket, mass } of plan.takings) {
      this.left[bucket] = (this.left[bucket] as number) - mass;
      this.takers[bucket]?.set(place, mass);
    }
  }

  takeBack(place: number): BatchPlan | undefined {
    const plan = this.plans[place];
    this.plans[place] = undefined;
    for (const { bucket, mass } of plan?.takings ?? []) {
      this.left[bucket] = (this.left[bucket] as number) + mass;
      this.takers[bucket]?.delete(place);
    }
    return plan;
  }

  takersOf(bucket: number): readonly number[] {
    return [...(this.takers[bucket]?.keys() ?? [])];
  }

  /** Batches that cannot keep their part of a bucket without this plan: a sliver stays, or only the last may have such a part. */
  stranded(plan: BatchPlan): number[] {
    return plan.takings.flatMap(({ bucket }) => {
      const left = this.left[bucket] as number;
      return [...(this.takers[bucket] ?? [])].flatMap(([place, mass]) => {
        const { ask, minimum } = this.batches[place] as QueueBatch;
        return left < this.sliver || mass % ask.readability !== 0 || mass < minimum ? [place] : [];
      });
    });
  }

  /** How each candidate may give to a batch that has no part of it now. */
  limitsFor(batch: QueueBatch): Limits {
    const count = batch.buckets.length;
    const [partly, most] = [new Float64Array(count), new Float64Array(count)];
    batch.buckets.forEach((bucket, k) => {
      const left = this.left[bucket] as number;
      const cap = batch.caps[k] as number;
      const part = Math.min(cap, left - this.sliver);
      const isWhole = left > 0 && cap >= left && this.mayEmpty(batch, bucket);
      partly[k] = part;
      most[k] = isWhole ? left : part >= batch.minimum ? part : 0;
    });
    return { least: new Float64Array(count).fill(batch.minimum), partly, most };
  }

  /** In the order of the queue the last that takes of a bucket empties it; those before leave no sliver, and keep to the step. */
  private mayEmpty({ place, ask, minimum }: QueueBatch, bucket: number): boolean {
    const others = this.takers[bucket] as Map<number, number>;
    const last = Math.max(...others.keys());
    if (place > last) return true;
    const left = this.left[bucket] as number;
    return left >= minimum && left % ask.readability === 0 && (others.get(last) as number) >= this.sliver;
  }

  /** Of each bucket that is used up: the batch that comes last and empties it. */
  emptiedBy(bucket: number): number | undefined {
    if (this.left[bucket] !== 0) return undefined;
    return this.takersOf(bucket).reduce<number | undefined>((last, place) => Math.max(last ?? 0, place), undefined);
  }
}
