import { DualSimplex } from './dual-simplex.ts';
import { WHOLE } from './mass.ts';
import type { Limits, QueueBatch } from './queue-batch.ts';
import { type Bounded, NodeHeap } from './queue-heap.ts';
import { type Point, inspectPoint } from './queue-point.ts';
import type { BoxedProgram } from './tableau.ts';

/** What a batch gives when a mg of each bucket has a price. Values in mg: reused − prices − κ·buckets. */
export interface Priced {
  /** No plan has a greater value; floating point. */
  bound: number;
  /** Of the best plan found, before rounding, and what it takes of each candidate; undefined: none above the floor. */
  value: number;
  taken: Float64Array | undefined;
}

/** Plans that agree in what is decided so far. */
export interface Node extends Bounded {
  lp: DualSimplex;
  opened: number;
  /** The variable that stands for each candidate: its own, once opened one that counts no more; −1 when closed. */
  columns: Int32Array;
}

/** Of the batch: a bound nearer than this is reached. */
const REACHED = 1e-6;
const MOST_TURNS = 4;
/** What a part of a bucket gains more than it does, a little different for each: among equals the simplex goes round in circles. */
const TIE = 1e-8;

/** Branch and bound over one batch at prices, each node followed down to a plan; masses as parts of the greatest batch. */
export class PricedSearch {
  readonly gains: Float64Array;
  readonly unit: number;
  readonly worth: number;
  private readonly program: BoxedProgram;
  private readonly open = new NodeHeap<Node>();
  private readonly spare: DualSimplex[] = [];
  private best: number;
  private taken: Float64Array | undefined;
  private ended = -Infinity;

  /** @param floor mg: a value that is known to be reached; only plans above it are looked for */
  constructor(
    readonly batch: QueueBatch,
    prices: Float64Array,
    readonly limits: Limits,
    floor: number,
  ) {
    this.unit = batch.search.greatest;
    this.worth = batch.ask.worthOpening / this.unit;
    this.best = floor / this.unit;
    this.gains = Float64Array.from(batch.buckets, (place) => 1 - (prices[place] as number));
    this.program = this.programOf();
    const lp = this.blank();
    const columns = Int32Array.from(batch.buckets, (_, k) => ((limits.most[k] as number) > 0 ? k : -1));
    columns.forEach((column, k) => column === -1 && lp.setBounds(k, 0, 0));
    const root = { lp, bound: Infinity, opened: 0, columns };
    const solved = this.settle(root, -Infinity);
    if (solved !== undefined) this.open.push(solved);
  }

  /** Once there is one, what proves goes before what finds. */
  get hasPlan(): boolean {
    return this.best > 0;
  }

  /** Goes on. @param nodes how many nodes to look into at most @returns whether that was enough */
  run(nodes: number): boolean {
    let left = nodes;
    for (let node = this.open.pop(); node !== undefined; node = this.open.pop()) {
      if (node.bound <= this.best + REACHED) {
        this.end(node.bound);
        return true;
      }
      for (let on: Node | undefined = node; on !== undefined; on = this.follow(on)) {
        if (on.bound <= this.best + REACHED) {
          this.end(on.bound);
          break;
        }
        if (left-- > 0) continue;
        this.open.push(on);
        return false;
      }
    }
    return true;
  }

  get found(): Priced {
    const { unit, best, taken } = this;
    const bound = Math.max(best, this.ended, this.open.top?.bound ?? -Infinity) * unit;
    return { bound, value: best * unit, taken: taken?.map((part) => part * unit) };
  }

  /** Keeps the plan if it is one; else branches, and goes on with the better way. */
  private follow(node: Node): Node | undefined {
    const point = inspectPoint(this, node);
    if (point.value > this.best) {
      this.best = point.value;
      this.taken = point.taken;
    }
    const isDone = point.value >= node.bound - REACHED / 10;
    if (!isDone) this.closeHopeless(node);
    const ways = isDone ? [] : this.branch(node, point);
    if (ways === undefined) this.end(node.bound);
    this.spare.push(node.lp);
    const [one, other] = ways ?? [];
    if (one === undefined || other === undefined) return one ?? other;
    this.open.push(other);
    return one;
  }

  /** Opened, these would lower the bound to the best value or less: by what they cost at least, and by counting as one. */
  private closeHopeless({ lp, bound, columns, opened }: Node): void {
    const { countSlack } = this.batch.relaxation;
    const opening = this.worth + (countSlack === -1 ? 0 : lp.multiplier(countSlack));
    const room = opened < this.batch.ask.maximumBuckets ? bound - this.best : 0;
    for (let k = 0; k < columns.length; k++) {
      const cost = columns[k] === k ? lp.multiplier(k) : 0;
      if (cost <= 0) continue;
      const { least, partly, most } = this.limitsOf(k);
      const lower = partly >= least ? least : most;
      if (Math.min(cost * most, cost * lower + opening * (1 - lower / most)) < room) continue;
      lp.setBounds(k, 0, 0);
      columns[k] = -1;
    }
  }

  private branch(node: Node, { candidate, row }: Point): (Node | undefined)[] | undefined {
    if (candidate === -1 && row === -1) return undefined;
    // Little ink, but it decides about whole buckets.
    if (row !== -1) return this.branchFresh(node, row);
    if (node.columns[candidate] !== candidate) return this.branchGap(node, candidate);
    const closed = this.child(node, node.opened, node.columns.with(candidate, -1), (lp) =>
      lp.setBounds(candidate, 0, 0),
    );
    return [this.openBucket(node, candidate), closed];
  }

  /** An opened bucket counts as one and costs κ whatever it gives: a variable of its own has the mass alone. */
  private openBucket(node: Node, k: number): Node | undefined {
    const { maximumBuckets } = this.batch.ask;
    if (node.opened >= maximumBuckets) return undefined;
    const { countSlack, firstVariant } = this.batch.relaxation;
    const { least, partly, most } = this.limitsOf(k);
    const variant = firstVariant + node.opened;
    return this.child(node, node.opened + 1, node.columns.with(k, variant), (lp) => {
      const without = countSlack === -1 ? undefined : { slack: countSlack, entry: 1 / most };
      lp.addVariant(variant, k, without, this.worth / most);
      lp.setBounds(k, 0, 0);
      lp.setBounds(variant, partly >= least ? least : most, most);
      if (countSlack !== -1) lp.setBounds(countSlack, node.opened + 1, maximumBuckets);
    });
  }

  /** What would stay of an opened bucket is a sliver: less is taken, or all. */
  private branchGap(node: Node, k: number): (Node | undefined)[] {
    const variable = node.columns[k] as number;
    const { least, partly, most } = this.limitsOf(k);
    return [
      this.child(node, node.opened, node.columns, (lp) => lp.setBounds(variable, least, partly)),
      this.child(node, node.opened, node.columns, (lp) => lp.setBounds(variable, most, most)),
    ];
  }

  private branchFresh(node: Node, r: number): (Node | undefined)[] {
    const { rows, firstSlack } = this.batch.relaxation;
    const { component, most } = rows[r] as (typeof rows)[number];
    const enough = (this.batch.leastFresh[component] as number) / this.unit;
    const none = this.child(node, node.opened, node.columns, (lp) => lp.setBounds(firstSlack + r, 0, 0));
    const some = this.child(node, node.opened, node.columns, (lp) =>
      lp.setBounds(firstSlack + r, enough, most / WHOLE),
    );
    return (some?.bound ?? 0) > (none?.bound ?? 0) ? [some, none] : [none, some];
  }

  private child(node: Node, opened: number, columns: Int32Array, decide: (lp: DualSimplex) => void): Node | undefined {
    const lp = this.spare.pop() ?? this.blank();
    lp.copyFrom(node.lp);
    decide(lp);
    return this.settle(
      { lp, bound: node.bound, opened, columns: columns === node.columns ? columns.slice() : columns },
      this.best + REACHED,
    );
  }

  /** Solves it; undefined when there is no plan in it above the cutoff. */
  private settle(node: Node, cutoff: number): Node | undefined {
    const paid = node.opened * this.worth;
    let outcome = node.lp.solve(cutoff + paid);
    // Cut although it is above the cutoff: it has only run out of its pivots.
    for (let turn = 0; turn < MOST_TURNS && outcome === 'cut' && node.lp.objective - paid > cutoff; turn++)
      outcome = node.lp.solve(cutoff + paid);
    node.bound = Math.min(node.bound, node.lp.objective - paid);
    if (outcome === 'optimal' && node.bound > cutoff) return node;
    if (outcome !== 'infeasible') this.end(node.bound);
    this.spare.push(node.lp);
    return undefined;
  }

  private end(bound: number): void {
    this.ended = Math.max(this.ended, bound);
  }

  private limitsOf(k: number) {
    const { least, partly, most } = this.limits;
    return {
      least: (least[k] as number) / this.unit,
      partly: (partly[k] as number) / this.unit,
      most: (most[k] as number) / this.unit,
    };
  }

  private blank(): DualSimplex {
    return new DualSimplex(this.program, Math.min(this.batch.ask.maximumBuckets, this.batch.buckets.length));
  }

  private programOf() {
    const { program, rows, countSlack } = this.batch.relaxation;
    const width = program.gains.length;
    const [gains, upper, matrix] = [program.gains.slice(), program.upper.slice(), program.matrix.slice()];
    this.gains.forEach((gain, k) => {
      const { most } = this.limitsOf(k);
      upper[k] = most;
      gains[k] = most === 0 ? 0 : gain - this.worth / most + (TIE * (1 + (k % 89))) / 89;
      if (countSlack !== -1) matrix[rows.length * width + k] = most === 0 ? 0 : 1 / most;
    });
    return { ...program, gains, upper, matrix };
  }
}
