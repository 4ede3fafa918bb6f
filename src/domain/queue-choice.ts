import type { QueueBatch } from './queue-batch.ts';
import type { QueuePrices } from './queue-prices.ts';
import type { QueueRandom } from './queue-random.ts';
import type { BatchPlan } from './queue-round.ts';
import type { QueueShelf } from './queue-shelf.ts';

/** Batches of which plans are taken back at once. */
const MOST_CHOSEN = 4;
/** How often a batch is chosen whatever its plan is like, and how often only dear buckets are looked at. */
const ANY = 0.3;
const DEAR = 0.7;

/** Batches whose plans could be better together: one, and others that take of buckets which it could use. */
export class QueueChoice {
  constructor(
    private readonly batches: readonly QueueBatch[],
    private readonly shelf: QueueShelf,
    private readonly pricing: QueuePrices,
    private readonly random: QueueRandom,
  ) {}

  some(): number[] {
    const { random, batches, shelf, pricing } = this;
    const first = batches[this.first()] as QueueBatch;
    const chosen = new Set([first.place]);
    const count = 1 + random.below(MOST_CHOSEN);
    const wanted = [...first.buckets].filter((bucket) => shelf.takersOf(bucket).some((other) => other !== first.place));
    const dear = wanted.filter((bucket) => (pricing.prices[bucket] as number) > 0);
    const from = dear.length > 0 && random.next() < DEAR ? dear : wanted;
    for (let tries = 0; from.length > 0 && chosen.size < count && tries < 3 * MOST_CHOSEN; tries++) {
      const takers = shelf.takersOf(from[random.below(from.length)] as number);
      const other = takers[random.below(takers.length)];
      if (other !== undefined) chosen.add(other);
    }
    return [...chosen];
  }

  /** All, the largest first or nearly so. */
  all(): number[] {
    const weights = this.batches.map(({ search }) => search.greatest * (0.7 + 0.6 * this.random.next()));
    return [...weights.keys()].sort((a, b) => (weights[b] as number) - (weights[a] as number) || a - b);
  }

  /** The more a plan falls short of what the bound allows its batch at these prices, the likelier it is chosen. */
  private first(): number {
    const { random, batches } = this;
    if (random.next() < ANY) return random.below(batches.length);
    const regrets = batches.map((batch) => this.regretOf(batch));
    let left = random.next() * regrets.reduce((sum, regret) => sum + regret, 0);
    return Math.max(
      0,
      regrets.findIndex((regret) => (left -= regret) <= 0),
    );
  }

  private regretOf({ place }: QueueBatch): number {
    const { prices, valued } = this.pricing;
    const { value, takings } = this.shelf.plans[place] as BatchPlan;
    const paid = takings.reduce((sum, { bucket, mass }) => sum + mass * (prices[bucket] as number), 0);
    return Math.max(0, (valued[place] as number) - value + paid);
  }
}
