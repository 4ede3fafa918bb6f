import type { QueueBatch } from './queue-batch.ts';
import { PricedSearch } from './queue-branch.ts';
import type { QueuePrices } from './queue-prices.ts';
import { QueueRandom } from './queue-random.ts';
import { type BatchPlan, roundTaken } from './queue-round.ts';
import type { QueueShelf } from './queue-shelf.ts';

const NODES = 300;
/** What a mg that stays in a bucket that must be used up costs: more than anything gains. */
const MUST = 10;
/** Batches of which plans are taken back at once. */
const MOST_RUINED = 4;

/** Plans of all batches, made better by taking some back and making them anew from what is then left. */
export class QueueRecreation {
  private readonly random = new QueueRandom();

  constructor(
    private readonly batches: readonly QueueBatch[],
    private readonly shelf: QueueShelf,
    private readonly pricing: QueuePrices,
    private readonly fresh: readonly BatchPlan[],
    /** Buckets that must be used up. */
    private readonly musts: readonly number[],
  ) {}

  /** mg gained over fresh ink, less what is left of buckets that must be used up. */
  get value(): number {
    const gained = this.shelf.plans.reduce((sum, plan) => sum + (plan?.value ?? 0), 0);
    return this.musts.reduce((sum, bucket) => sum - MUST * (this.shelf.left[bucket] as number), gained);
  }

  get isEmptied(): boolean {
    return this.musts.every((bucket) => this.shelf.left[bucket] === 0);
  }

  /** First plans, the largest batch first. */
  planAll(): void {
    const order = [...this.batches].sort((a, b) => b.search.greatest - a.search.greatest || a.place - b.place);
    for (const { place } of order) this.plan(place, 1);
    this.offer(this.batches.keys());
  }

  /** Plans that go together make prices that let them. */
  private offer(places: Iterable<number>): void {
    for (const place of places) this.pricing.add(place, this.shelf.plans[place] as BatchPlan);
  }

  /** One batch's plan from what is left, at a part of the prices. */
  plan(place: number, part: number): void {
    const batch = this.batches[place] as QueueBatch;
    const limits = this.shelf.limitsFor(batch);
    const prices = this.pricing.prices.map((price) => price * part);
    for (const bucket of this.musts) prices[bucket] = -MUST;
    const search = new PricedSearch(batch, prices, limits, 0);
    search.run(NODES);
    const { taken } = search.found;
    const fresh = this.fresh[place] as BatchPlan;
    this.shelf.put(place, taken === undefined ? fresh : roundTaken(batch, taken, limits, fresh));
  }

  /** Takes some plans back and makes them anew, each after a yield; keeps what is not worse. */
  *turn(): Generator<void, boolean> {
    const before = this.value;
    const ruined = this.choose();
    const kept = new Map<number, BatchPlan>();
    const takeBack = (place: number) => {
      const plan = this.shelf.takeBack(place);
      if (plan === undefined) return;
      kept.set(place, plan);
      this.shelf.stranded(plan).forEach(takeBack);
    };
    ruined.forEach(takeBack);
    const part = [0, 0.5, 1][this.random.below(3)] as number;
    for (const place of this.random.shuffle([...kept.keys()])) {
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

  /** A batch, and others that take of buckets which it could use. */
  private choose(): number[] {
    const { random, batches, shelf, pricing } = this;
    const first = batches[random.below(batches.length)] as QueueBatch;
    const chosen = new Set([first.place]);
    const count = 1 + random.below(MOST_RUINED);
    const wanted = [...first.buckets].filter((bucket) => shelf.takersOf(bucket).some((other) => other !== first.place));
    const dear = wanted.filter((bucket) => (pricing.prices[bucket] as number) > 0);
    const from = dear.length > 0 && random.next() < 0.7 ? dear : wanted;
    for (let tries = 0; from.length > 0 && chosen.size < count && tries < 3 * MOST_RUINED; tries++) {
      const takers = shelf.takersOf(from[random.below(from.length)] as number);
      const other = takers[random.below(takers.length)];
      if (other !== undefined) chosen.add(other);
    }
    return [...chosen];
  }
}
