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

  /** Batches whose part of a bucket was right only as its last one: off the step, or too little to take out. */
  stranded(plan: BatchPlan): number[] {
    return plan.takings.flatMap(({ bucket }) =>
      [...(this.takers[bucket] ?? [])].flatMap(([place, mass]) => {
        const { ask, minimum } = this.batches[place] as QueueBatch;
        return mass % ask.readability !== 0 || mass < minimum ? [place] : [];
      }),
    );
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

  /** In the order of the queue the last that takes of a bucket empties it; what the others leave is on their step and no sliver. */
  private mayEmpty({ place, ask, minimum }: QueueBatch, bucket: number): boolean {
    const others = this.takers[bucket] as Map<number, number>;
    if (others.size === 0) return true;
    const left = this.left[bucket] as number;
    if (left < Math.max(this.sliver, minimum)) return false;
    const isLast = [...others.keys()].every((other) => other < place);
    if (!isLast && left % ask.readability !== 0) return false;
    return [...others.values()].every((mass) => mass >= this.sliver);
  }

  /** Of each bucket that is used up: the batch that comes last and empties it. */
  emptiedBy(bucket: number): number | undefined {
    if (this.left[bucket] !== 0) return undefined;
    return this.takersOf(bucket).reduce<number | undefined>((last, place) => Math.max(last ?? 0, place), undefined);
  }
}
