import { EPSILON, Tableau } from './tableau.ts';

export type Outcome = 'optimal' | 'infeasible' | 'cut';

/** By how much a bound may be passed. */
const FEASIBLE = 1e-9;
const MOST_PIVOTS = 400;

/**
 * Bounded dual simplex. Since all bounds are finite, any basis is dual feasible once each column outside it stands at
 * the right bound: a change of bounds goes on from the last optimum. The objective falls to the optimum, so that it is
 * a bound at each step. Floating point: it steers a search, it never proves.
 */
export class DualSimplex extends Tableau {
  /** The row that cannot be kept, when infeasible, and on which side. */
  private broken = -1;
  private brokenBelow = false;

  /** On to the optimum; 'cut' as soon as the objective is below `cutoff`. */
  solve(cutoff = -Infinity): Outcome {
    for (let n = 0; n < MOST_PIVOTS; n++) {
      const r = this.mostBroken();
      if (r === -1) return 'optimal';
      if (this.objective < cutoff) return 'cut';
      const variable = this.inside[r] as number;
      const below = (this.values[r] as number) < (this.lower[variable] as number);
      const before = this.objective;
      const q = this.entering(r, below);
      if (q === -1) {
        // What passed to its other bound on the way does not belong to the multipliers.
        this.objective = before;
        this.broken = r;
        this.brokenBelow = below;
        return 'infeasible';
      }
      this.exchange(r, q, !below);
    }
    return 'cut';
  }

  private mostBroken(): number {
    let found = -1;
    let most = FEASIBLE;
    for (let r = 0; r < this.rows; r++) {
      const variable = this.inside[r] as number;
      const value = this.values[r] as number;
      const broken = Math.max((this.lower[variable] as number) - value, value - (this.upper[variable] as number));
      if (broken > most) {
        most = broken;
        found = r;
      }
    }
    return found;
  }

  /** The column that comes in; columns that would pass their other bound on the way stand there instead. */
  private entering(r: number, below: boolean): number {
    const nearest = this.nearest(r * this.room, below);
    if (nearest === -1 || this.isEnough(r, nearest, below)) return nearest;
    const at = r * this.room;
    const helping: number[] = [];
    for (let k = 0; k < this.outside; k++) if (this.helps(at, k, below)) helping.push(k);
    helping.sort((a, b) => this.compareRatios(a, b, at));
    for (const q of helping) {
      if (this.isEnough(r, q, below)) return q;
      const column = this.columns[q] as number;
      const range = (this.upper[column] as number) - (this.lower[column] as number);
      const upwards = this.atUpper[q] === 0;
      this.atUpper[q] = Number(upwards);
      this.shift(q, upwards ? range : -range);
    }
    return -1;
  }

  /** Whether the column's range brings the row's variable to its bound. */
  private isEnough(r: number, q: number, below: boolean): boolean {
    const variable = this.inside[r] as number;
    const value = this.values[r] as number;
    const missing = below ? (this.lower[variable] as number) - value : value - (this.upper[variable] as number);
    const column = this.columns[q] as number;
    const range = (this.upper[column] as number) - (this.lower[column] as number);
    return Math.abs(this.cells[r * this.room + q] as number) * range >= missing - FEASIBLE;
  }

  private nearest(at: number, below: boolean): number {
    let found = -1;
    for (let k = 0; k < this.outside; k++) {
      if (this.helps(at, k, below) && (found === -1 || this.compareRatios(k, found, at) < 0)) found = k;
    }
    return found;
  }

  /** Whether the column can move the row's variable the way it must go. */
  private helps(at: number, k: number, below: boolean): boolean {
    const cell = this.cells[at + k] as number;
    // Going up lowers the row's variable where the cell is positive.
    if (below === (this.atUpper[k] === 0) ? cell >= -EPSILON : cell <= EPSILON) return false;
    const column = this.columns[k] as number;
    return this.lower[column] !== this.upper[column];
  }

  /** By what a unit of the row's variable costs; of two that cost the same the one with the greater cell is first. */
  private compareRatios(a: number, b: number, at: number): number {
    const cellA = Math.abs(this.cells[at + a] as number);
    const cellB = Math.abs(this.cells[at + b] as number);
    const by = Math.abs(this.costs[a] as number) / cellA - Math.abs(this.costs[b] as number) / cellB;
    return Math.abs(by) <= 1e-12 ? cellB - cellA : by;
  }

  /** Multiplier of a row, by its slack: any multipliers give a bound. */
  multiplier(slack: number): number {
    const place = this.places[slack] as number;
    return place < 0 ? 0 : 0 - (this.costs[place] as number);
  }

  /** When infeasible: what may be added to the multipliers, any number of times, each time lowering the bound. */
  ray(slack: number): number {
    const sign = this.brokenBelow ? 1 : -1;
    const place = this.places[slack] as number;
    if (place < 0) return -1 - place === this.broken ? sign : 0;
    return sign * (this.cells[this.broken * this.room + place] as number);
  }

  /** When infeasible: by how much a bound cannot be kept. */
  get brokenBy(): number {
    const variable = this.inside[this.broken] as number;
    const value = this.values[this.broken] as number;
    return Math.max((this.lower[variable] as number) - value, value - (this.upper[variable] as number));
  }
}
