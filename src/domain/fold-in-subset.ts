import { DualSimplex, type Outcome } from './dual-simplex.ts';
import { type Bound, type Certificate, boundOf, slackLimits } from './fold-in-bound.ts';
import type { Candidate, Search } from './fold-in-candidates.ts';
import {
  type Change,
  type Decision,
  type Decisions,
  isOpened,
  limitsOf,
  startOf,
  undecided,
  withChange,
} from './fold-in-decisions.ts';
import { type Relaxation, type Row, relaxationOf } from './fold-in-program.ts';

/** A subset of all plans: what is decided of them, and a bound of their objectives. */
export interface Node {
  certificate: Certificate;
  bound: Bound;
  depth: number;
}

/** A bound that no batch has, in batches: what cannot be is as good as that. */
const HOPELESS = -3;

/** The linear relaxation of a subset of plans; decisions are changes of bounds, so each goes on from the last optimum. */
export class Subset {
  readonly search: Search;
  readonly relaxation: Relaxation;
  private readonly simplex: DualSimplex;
  decisions: Decisions;
  private opened = 0;
  private outcome: Outcome = 'optimal';

  /** Where nothing is decided, or a copy. */
  constructor(of: { search: Search; relaxation: Relaxation } | Subset) {
    this.search = of.search;
    this.relaxation = of.relaxation;
    if (of instanceof Subset) {
      this.simplex = new DualSimplex(of.simplex);
      this.decisions = of.decisions;
      this.opened = of.opened;
      this.outcome = of.outcome;
      return;
    }
    this.simplex = new DualSimplex(of.relaxation.program, of.search.candidates.length);
    this.decisions = undecided(of.search);
  }

  copyFrom(other: Subset): void {
    this.simplex.copyFrom(other.simplex);
    this.decisions = other.decisions;
    this.opened = other.opened;
    this.outcome = other.outcome;
  }

  /** Decides what `decisions` have decided beyond these. */
  decide(decisions: Decisions): void {
    const before = this.decisions;
    this.decisions = decisions;
    if (decisions.batch !== before.batch) this.limitBatch();
    decisions.buckets.forEach((to, i) => before.buckets[i] !== to && this.limitBucket(i, before.buckets[i], to));
    decisions.fresh.forEach((to, j) => before.fresh[j] !== to && this.limitFresh(j));
  }

  change(change: Change): void {
    const before = this.decisions;
    this.decisions = withChange(before, change);
    if ('bucket' in change) this.limitBucket(change.bucket, before.buckets[change.bucket], change.to);
    else if ('component' in change) this.limitFresh(change.component);
    else this.limitBatch();
  }

  private limitBucket(i: number, from: Decision | undefined, to: Decision): void {
    const { simplex, search, relaxation } = this;
    if (!isOpened(from)) {
      if (to !== 'closed') this.open(i);
      simplex.setBounds(i, 0, 0);
      if (to === 'closed') return;
    }
    const { least, most } = limitsOf(search.candidates[i] as Candidate, to, search.minimum);
    simplex.setBounds(relaxation.firstVariant + i, least / search.greatest, most / search.greatest);
  }

  /** An opened bucket counts as one and costs its opening whatever it gives: its mass alone is left in the program. */
  private open(i: number): void {
    const { simplex, search, relaxation } = this;
    const { countSlack, program } = relaxation;
    const width = program.gains.length;
    const entry = countSlack === -1 ? 0 : (program.matrix[relaxation.rows.length * width + i] as number);
    const without = countSlack === -1 ? undefined : { slack: countSlack, entry };
    simplex.addVariant(relaxation.firstVariant + i, i, without, 1 - (program.gains[i] as number));
    this.opened += 1;
    if (countSlack !== -1) simplex.setBounds(countSlack, this.opened, search.problem.maximumBuckets);
  }

  private limitFresh(j: number): void {
    const { search, relaxation } = this;
    const { least, most } = slackLimits(search, relaxation.rows[j] as Row, this.decisions);
    this.simplex.setBounds(relaxation.firstSlack + j, least / search.greatest, most / search.greatest);
  }

  /** The least that can be weighed of a component changes with the least batch. */
  private limitBatch(): void {
    const { search, relaxation } = this;
    const { batch, fresh } = this.decisions;
    if (!relaxation.isRanged) return;
    const column = relaxation.firstSlack - 1;
    const beyond = (mass: number) => (mass - search.least) / search.greatest;
    this.simplex.setBounds(column, beyond(batch.least), beyond(batch.greatest));
    fresh.forEach((to, j) => to === 'some' && this.limitFresh(j));
  }

  /** @param cutoff mg: an objective below which nothing is sought */
  solve(cutoff = -Infinity): Outcome {
    const { search } = this;
    if (this.opened > search.problem.maximumBuckets) return (this.outcome = 'infeasible');
    this.outcome = this.simplex.solve((cutoff + this.fixed) / search.greatest);
    return this.outcome;
  }

  /** mg that the objective is less than the program's: what the opened cost, and the least batch in a range. */
  private get fixed(): number {
    return this.opened * this.search.problem.worthOpening + (this.relaxation.isRanged ? this.search.least : 0);
  }

  /** Cells of the tableau where nothing is decided. */
  get size(): number {
    return this.relaxation.program.matrix.length;
  }

  /** mg, of the linear relaxation. */
  get objective(): number {
    return this.simplex.objective * this.search.greatest - this.fixed;
  }

  /** mg that come from each bucket. */
  get taken(): Float64Array {
    const { simplex, search, relaxation } = this;
    const { buckets } = this.decisions;
    const taken = new Float64Array(buckets.length);
    for (let i = 0; i < taken.length; i++) {
      const decision = buckets[i];
      if (decision === 'closed') continue;
      taken[i] = simplex.value(decision === 'free' ? i : relaxation.firstVariant + i) * search.greatest;
    }
    return taken;
  }

  /** mg of fresh ink of a component; of a foreign one the room that is left for it. */
  freshOf(j: number): number {
    return this.simplex.value(this.relaxation.firstSlack + j) * this.search.greatest;
  }

  /** mg */
  get batch(): number {
    if (!this.relaxation.isRanged) return this.search.least;
    return this.search.least + this.simplex.value(this.relaxation.firstSlack - 1) * this.search.greatest;
  }

  get certificate(): Certificate {
    return { decisions: this.decisions, multipliers: this.multipliers() };
  }

  private multipliers(): Float64Array {
    const { rows, firstSlack } = this.relaxation;
    const found = new Float64Array(rows.length);
    for (let r = 0; r < found.length; r++) found[r] = this.simplex.multiplier(firstSlack + r);
    if (this.outcome !== 'infeasible' || this.opened > this.search.problem.maximumBuckets) return found;
    const times = (this.simplex.objective - HOPELESS) / this.simplex.brokenBy;
    return found.map((pi, r) => pi + times * this.simplex.ray(firstSlack + r));
  }
}

/** Where nothing is decided but the buckets that must be used, at its optimum. */
export function rootOf(search: Search): Subset {
  const root = new Subset({ search, relaxation: relaxationOf(search) });
  root.decide(startOf(search));
  root.solve();
  return root;
}

/** With the bound that its multipliers prove. */
export function nodeOf({ search, relaxation }: Subset, certificate: Certificate, depth: number): Node {
  return { certificate, bound: boundOf(search, relaxation, certificate), depth };
}

/** mg below which a mass is none. */
export const NOTHING = 1e-3;
