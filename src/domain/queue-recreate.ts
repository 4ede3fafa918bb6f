import type { QueueBatch } from './queue-batch.ts';
import { PricedSearch } from './queue-branch.ts';
import { QueueChoice } from './queue-choice.ts';
import type { QueuePrices } from './queue-prices.ts';
import { QueueRandom } from './queue-random.ts';
import { type BatchPlan, roundTaken } from './queue-round.ts';
import type { QueueShelf } from './queue-shelf.ts';

const NODES = 300;
/** A bucket that must be used up; `price`: what a mg that stays of it costs, all of it more than a whole queue gains. */
export interface Must {
  bucket: number;
  price: number;
}

/** Of so many turns one makes all plans anew. */
const ALL_EVERY = 15;

/** Plans of all batches, made better by taking some back and making them anew from what is then left. */
export class QueueRecreation {
  private readonly random = new QueueRandom();
  private readonly choice: QueueChoice;
  private turns = 0;

  constructor(
    private readonly batches: readonly QueueBatch[],
    private readonly shelf: QueueShelf,
    private readonly pricing: QueuePrices,
    private readonly fresh: readonly BatchPlan[],
    private readonly musts: readonly Must[],
  ) {
    this.choice = new QueueChoice(batches, shelf, pricing, this.random);
  }

  /** mg gained over fresh ink, less what is left of buckets that must be used up. */
  get value(): number {
    const gained = this.shelf.plans.reduce((sum, plan) => sum + (plan?.value ?? 0), 0);
    return this.musts.reduce((sum, { bucket, price }) => sum - price * (this.shelf.left[bucket] as number), gained);
  }

  get isEmptied(): boolean {
    return this.musts.every(({ bucket }) => this.shelf.left[bucket] === 0);
  }

  /** First plans, the largest batch first. */
  planAll(): void {
    const order = [...this.batches].sort((a, b) => b.search.greatest - a.search.greatest || a.place - b.place);
    for (const { place } of order) this.plan(place, 1);
    this.offer(this.batches.keys());
  }

  /** Takes some plans back and makes them anew, a yield after each; keeps what is not worse. Returns whether it is better. */
  *turn(): Generator<void, boolean> {
    const isWhole = ++this.turns % ALL_EVERY === 0;
    const before = this.value;
    const kept = this.takeBack(isWhole ? this.choice.all() : this.choice.some());
    const part = isWhole ? 1 : this.random.below(3) / 2;
    for (const place of isWhole ? kept.keys() : this.random.shuffle([...kept.keys()])) {
      this.plan(place, part);
      yield;
    }
    const after = this.value;
    if (after > before) this.offer(kept.keys());
    if (after >= before) return after > before;
    for (const place of kept.keys()) this.shelf.takeBack(place);
    kept.forEach((plan, place) => this.shelf.put(place, plan));
    return false;
  }

  /** With those that cannot stand without them. */
  private takeBack(places: readonly number[]): Map<number, BatchPlan> {
    const kept = new Map<number, BatchPlan>();
    const takeBack = (place: number) => {
      const plan = this.shelf.takeBack(place);
      if (plan === undefined) return;
      kept.set(place, plan);
      this.shelf.stranded(plan).forEach(takeBack);
    };
    places.forEach(takeBack);
    return kept;
  }

  /** One batch's plan from what is left, at a part of the prices. */
  private plan(place: number, part: number): void {
    const batch = this.batches[place] as QueueBatch;
    const limits = this.shelf.limitsFor(batch);
    const prices = this.pricing.prices.map((price) => price * part);
    for (const { bucket, price } of this.musts) prices[bucket] = -price;
    const search = new PricedSearch(batch, prices, limits, 0);
    search.run(NODES);
    const { taken } = search.found;
    const fresh = this.fresh[place] as BatchPlan;
    this.shelf.put(place, taken === undefined ? fresh : roundTaken(batch, taken, limits, fresh));
  }

  /** Plans that go together make prices that let them. */
  private offer(places: Iterable<number>): void {
    for (const place of places) this.pricing.add(place, this.shelf.plans[place] as BatchPlan);
  }
}
