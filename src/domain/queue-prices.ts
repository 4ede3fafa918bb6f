import { type Limits, type QueueBatch, countAskers, widestLimits } from './queue-batch.ts';
import { PricedSearch } from './queue-branch.ts';
import { type Column, solveMaster } from './queue-master.ts';
import type { BatchPlan } from './queue-round.ts';

/** How much of the new prices is mixed into the best ones: whole steps of theirs swing. */
const MIXED = 0.4;
const FIRST_NODES = 100;
const MOST_NODES = 4000;
const NODES_A_STEP = 100;
const MOST_ROUNDS = 500;
/** Of the bound: rounds that lower it by less stand still. */
const STILL = 2e-5;
/** …and how near to the bound the best mix of plans then comes: it is no longer the prices that keep it up. */
const MIX_NEAR = 5e-3;
/** mg by which a batch's bound may be off before it is sought anew, at first. */
const FIRST_NEAR = 200;

/** What was last found of a batch, and at which prices. */
interface Known {
  prices: Float64Array;
  bound: number;
  floor: number;
  nodes: number;
}

/** Prices of a mg of each bucket, and the bound that they prove: L(λ) = Σλ·a + Σ A_b(1 − λ) (core mathematics D). */
export class QueuePrices {
  /** The best so far. */
  readonly prices: Float64Array;
  /** mg: no queue of plans gains more over fresh ink. */
  bound = Infinity;
  /** How many rounds are done. */
  round = 0;
  /** Of each batch alone, with all of the shelf for it. */
  readonly alone: Float64Array;
  /** What each batch is valued at most at the best prices. */
  readonly valued: Float64Array;
  private readonly limits: readonly Limits[];
  private readonly columns: Column[][];
  private readonly known: (Known | undefined)[];
  private nodes = FIRST_NODES;
  private near = FIRST_NEAR;

  constructor(
    private readonly batches: readonly QueueBatch[],
    private readonly usable: readonly number[],
    /** Buckets that must be used up: their prices may be below 0. */
    private readonly musts: ReadonlySet<number>,
  ) {
    const sliver = Math.min(...batches.map(({ ask }) => ask.sliver));
    const askers = countAskers(batches, usable.length);
    this.limits = batches.map((batch) => widestLimits(batch, askers, sliver));
    this.prices = new Float64Array(usable.length);
    this.alone = new Float64Array(batches.length).fill(Infinity);
    this.valued = new Float64Array(batches.length);
    this.columns = batches.map(() => []);
    this.known = batches.map(() => undefined);
  }

  /** A plan that was found otherwise. */
  add(place: number, { value, takings }: BatchPlan): void {
    const buckets = takings.map(({ bucket }) => bucket);
    this.columns[place]?.push({ value, buckets, masses: takings.map(({ mass }) => mass) });
  }

  /** Yields often; ends when the prices stand and each batch is known well enough. */
  *rounds(): Generator<void, void> {
    let mix = { prices: new Float64Array(this.prices.length), value: 0 };
    for (; ; this.round++) {
      const before = this.bound;
      const count = this.columnCount;
      const mixed = this.prices.map((price, i) => price + MIXED * ((mix.prices[i] as number) - price));
      yield* this.ask(mixed);
      const isStill = before - this.bound <= STILL * Math.abs(this.bound);
      const isOld = this.columnCount === count;
      if ((isStill && isOld && this.nodes >= MOST_NODES) || this.round === MOST_ROUNDS) return;
      if (isStill && (isOld || this.bound - mix.value < MIX_NEAR * Math.abs(this.bound))) this.lookCloser();
      mix = solveMaster(this.columns, this.usable, this.musts);
      yield;
    }
  }

  private lookCloser(): void {
    this.nodes = Math.min(MOST_NODES, 2 * this.nodes);
    this.near /= 4;
  }

  private get columnCount(): number {
    return this.columns.reduce((sum, list) => sum + list.length, 0);
  }

  private *ask(prices: Float64Array): Generator<void, void> {
    const bounds = new Float64Array(this.batches.length);
    for (const batch of this.batches) bounds[batch.place] = yield* this.valueAt(batch, prices);
    const shelf = this.usable.reduce((sum, mass, i) => sum + mass * (prices[i] as number), 0);
    const bound = bounds.reduce((sum, each) => sum + each, shelf);
    if (bound >= this.bound) return;
    this.bound = bound;
    this.prices.set(prices);
    this.valued.set(bounds);
  }

  /** mg: A_b(1 − λ) or a little more; keeps the plan that reaches it as a column. */
  private *valueAt(batch: QueueBatch, prices: Float64Array): Generator<void, number> {
    const columns = this.columns[batch.place] as Column[];
    const floor = columns.reduce((most, column) => Math.max(most, valueOf(column, prices)), 0);
    const known = this.known[batch.place];
    if (known !== undefined) {
      const bound = known.bound + shiftOf(batch, known.prices, prices);
      const isWell = known.nodes >= this.nodes || known.bound - known.floor < this.near;
      if (isWell && bound - floor < known.bound - known.floor + this.near) return bound;
    }
    const search = new PricedSearch(batch, prices, this.limits[batch.place] as Limits, floor);
    for (let nodes = 0; nodes < this.nodes && !search.run(NODES_A_STEP); nodes += NODES_A_STEP) yield;
    yield;
    const { bound, value, taken } = search.found;
    if (taken !== undefined) columns.push(columnOf(batch, taken, value, prices));
    this.known[batch.place] = { prices, bound, floor: value, nodes: this.nodes };
    if (prices.every((price) => price === 0)) this.alone[batch.place] = bound;
    return bound;
  }
}

function valueOf({ value, buckets, masses }: Column, prices: Float64Array): number {
  return buckets.reduce((sum, bucket, n) => sum - (masses[n] as number) * (prices[bucket] as number), value);
}

function columnOf(batch: QueueBatch, taken: Float64Array, value: number, prices: Float64Array): Column {
  const [buckets, masses]: [number[], number[]] = [[], []];
  let free = value;
  taken.forEach((mass, k) => {
    if (mass === 0) return;
    const bucket = batch.buckets[k] as number;
    buckets.push(bucket);
    masses.push(mass);
    free += mass * (prices[bucket] as number);
  });
  return { value: free, buckets, masses };
}

/** By how much lower prices can raise a batch's value: of each bucket its cap, of as many buckets as may be opened. */
function shiftOf(batch: QueueBatch, from: Float64Array, to: Float64Array): number {
  const gains = batch.caps.map((cap, k) => {
    const bucket = batch.buckets[k] as number;
    return Math.max(0, (from[bucket] as number) - (to[bucket] as number)) * cap;
  });
  return gains
    .sort((a, b) => b - a)
    .subarray(0, batch.ask.maximumBuckets)
    .reduce((sum, gain) => sum + gain, 0);
}
