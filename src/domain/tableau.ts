/** max gains·x with slack_r + Σ_k a_rk x_k = right_r; every column and every slack lies between finite bounds. */
export interface BoxedProgram {
  /** Row by row, `rows` × `columns`. */
  matrix: Float64Array;
  right: Float64Array;
  gains: Float64Array;
  /** Of the columns, then of the slacks. */
  lower: Float64Array;
  upper: Float64Array;
}

/** By how much an entry of the tableau must differ from 0 to count. */
export const EPSILON = 1e-9;

/** The place of a variable that stands outside the basis for good: its bounds are one, so its column is not kept. */
const DROPPED = -(2 ** 31);

/**
 * A dense tableau of the columns outside the basis; each of them stands at the bound that its cost asks for. Variables
 * are numbered: columns, slacks, then variants that are added later.
 */
export class Tableau {
  readonly rows: number;
  /** How many columns stand outside the basis, and for how many there is room. */
  protected outside: number;
  protected room: number;
  protected cells: Float64Array;
  protected costs: Float64Array;
  protected columns: Int32Array;
  protected atUpper: Uint8Array;
  /** Variable and value of each row. */
  protected readonly inside: Int32Array;
  protected readonly values: Float64Array;
  protected readonly lower: Float64Array;
  protected readonly upper: Float64Array;
  /** Where a variable stands: its place outside the basis, −1 − its row, or DROPPED. */
  protected readonly places: Int32Array;
  private readonly firstSlack: number;
  objective = 0;

  /** @param variants how many variables may be added later by `addVariant` */
  constructor(of: BoxedProgram | Tableau, variants = 0) {
    if (of instanceof Tableau) {
      this.rows = of.rows;
      this.firstSlack = of.firstSlack;
      this.outside = of.outside;
      this.room = of.room;
      this.cells = of.cells.slice();
      this.costs = of.costs.slice();
      this.columns = of.columns.slice();
      this.atUpper = of.atUpper.slice();
      this.inside = of.inside.slice();
      this.values = of.values.slice();
      this.lower = of.lower.slice();
      this.upper = of.upper.slice();
      this.places = of.places.slice();
      this.objective = of.objective;
      return;
    }
    const n = of.gains.length;
    const all = n + of.right.length + variants;
    this.rows = of.right.length;
    this.firstSlack = n;
    this.outside = n;
    this.room = n + Math.min(variants, 8);
    this.cells = new Float64Array(this.rows * this.room);
    copyRows(of.matrix, n, this.cells, this.room, n);
    this.costs = resized(of.gains, this.room);
    this.columns = new Int32Array(this.room);
    this.atUpper = new Uint8Array(this.room);
    this.inside = new Int32Array(this.rows);
    this.values = of.right.slice();
    this.lower = resized(of.lower, all);
    this.upper = resized(of.upper, all);
    this.places = new Int32Array(all);
    for (let r = 0; r < this.rows; r++) {
      this.inside[r] = n + r;
      this.places[n + r] = -1 - r;
    }
    for (let k = 0; k < n; k++) {
      this.columns[k] = k;
      this.places[k] = k;
      this.atUpper[k] = Number((this.costs[k] as number) > 0);
      this.shift(k, this.valueOutside(k));
    }
  }

  /** Takes over the state of another one of the same program. */
  copyFrom(other: Tableau): void {
    if (this.room < other.outside) this.makeRoom(other.room);
    if (this.room === other.room && 2 * other.outside > other.room) this.cells.set(other.cells);
    else copyRows(other.cells, other.room, this.cells, this.room, other.outside);
    this.costs.set(other.costs.subarray(0, other.outside));
    this.columns.set(other.columns.subarray(0, other.outside));
    this.atUpper.set(other.atUpper.subarray(0, other.outside));
    this.outside = other.outside;
    this.inside.set(other.inside);
    this.values.set(other.values);
    this.lower.set(other.lower);
    this.upper.set(other.upper);
    this.places.set(other.places);
    this.objective = other.objective;
  }

  /** Goes on from where it stands. */
  setBounds(variable: number, lower: number, upper: number): void {
    const k = this.places[variable] as number;
    if (k < 0) {
      this.lower[variable] = lower;
      this.upper[variable] = upper;
      return;
    }
    const before = this.valueOutside(k);
    this.lower[variable] = lower;
    this.upper[variable] = upper;
    const cost = this.costs[k] as number;
    if (cost > 0) this.atUpper[k] = 1;
    else if (cost < 0) this.atUpper[k] = 0;
    this.shift(k, this.valueOutside(k) - before);
    this.dropIfFixed(k);
  }

  /** Slacks are kept: they tell the multipliers. */
  private dropIfFixed(k: number): void {
    const variable = this.columns[k] as number;
    const isSlack = variable >= this.firstSlack && variable < this.firstSlack + this.rows;
    if (isSlack || this.lower[variable] !== this.upper[variable]) return;
    const last = --this.outside;
    this.places[variable] = DROPPED;
    if (k === last) return;
    const moved = this.columns[last] as number;
    this.columns[k] = moved;
    this.places[moved] = k;
    this.atUpper[k] = this.atUpper[last] as number;
    this.costs[k] = this.costs[last] as number;
    for (let at = 0; at < this.cells.length; at += this.room) this.cells[at + k] = this.cells[at + last] as number;
  }

  /**
   * A variable whose column is another one's without its entry in one row; it stands at 0 until it is given bounds.
   * @param entry what the other has in that row @param gain what this one gains more than the other
   */
  addVariant(variable: number, of: number, without: { slack: number; entry: number } | undefined, gain: number): void {
    if (this.outside === this.room) this.makeRoom(2 * this.room);
    const k = this.outside++;
    this.columns[k] = variable;
    this.places[variable] = k;
    this.lower[variable] = 0;
    this.upper[variable] = 0;
    this.atUpper[k] = 0;
    this.costs[k] = gain;
    for (let r = 0; r < this.rows; r++) this.cells[r * this.room + k] = 0;
    this.addColumn(k, of, 1);
    if (without !== undefined) this.addColumn(k, without.slack, -without.entry);
  }

  private addColumn(k: number, variable: number, factor: number): void {
    const from = this.places[variable] as number;
    if (from < 0) {
      const at = (-1 - from) * this.room + k;
      this.cells[at] = (this.cells[at] as number) + factor;
      return;
    }
    this.costs[k] = (this.costs[k] as number) + factor * (this.costs[from] as number);
    for (let at = 0; at < this.cells.length; at += this.room) {
      this.cells[at + k] = (this.cells[at + k] as number) + factor * (this.cells[at + from] as number);
    }
  }

  private makeRoom(room: number): void {
    const cells = new Float64Array(this.rows * room);
    copyRows(this.cells, this.room, cells, room, this.outside);
    this.cells = cells;
    this.costs = resized(this.costs, room);
    this.columns = resized(this.columns, room);
    this.atUpper = resized(this.atUpper, room);
    this.room = room;
  }

  /** The variable of row r leaves to its lower or upper bound; that of column q takes its place. */
  protected exchange(r: number, q: number, toUpper: boolean): void {
    const { cells, costs, values, room } = this;
    const leaving = this.inside[r] as number;
    const entering = this.columns[q] as number;
    const at = r * room;
    const p = cells[at + q] as number;
    const goal = (toUpper ? this.upper[leaving] : this.lower[leaving]) as number;
    const step = ((values[r] as number) - goal) / p;
    const value = this.valueOutside(q) + step;
    this.shift(q, step);
    values[r] = value;
    for (let k = 0; k < this.outside; k++) cells[at + k] = (cells[at + k] as number) / p;
    cells[at + q] = 1 / p;
    for (let i = 0; i < this.rows; i++) if (i !== r) this.eliminate(cells, i * room, at, q, p);
    this.eliminate(costs, 0, at, q, p);
    this.inside[r] = entering;
    this.columns[q] = leaving;
    this.places[entering] = -1 - r;
    this.places[leaving] = q;
    this.atUpper[q] = Number(toUpper);
    this.dropIfFixed(q);
  }

  private eliminate(into: Float64Array, offset: number, at: number, q: number, p: number): void {
    const { cells, outside } = this;
    const factor = into[offset + q] as number;
    if (factor === 0) return;
    for (let k = 0; k < outside; k++) {
      into[offset + k] = (into[offset + k] as number) - factor * (cells[at + k] as number);
    }
    into[offset + q] = -factor / p;
  }

  /** Moves the variable of a column outside the basis. */
  protected shift(k: number, by: number): void {
    if (by === 0) return;
    this.objective += (this.costs[k] as number) * by;
    for (let r = 0, at = k; r < this.rows; r++, at += this.room) {
      this.values[r] = (this.values[r] as number) - (this.cells[at] as number) * by;
    }
  }

  protected valueOutside(k: number): number {
    const column = this.columns[k] as number;
    return (this.atUpper[k] === 1 ? this.upper[column] : this.lower[column]) as number;
  }

  value(variable: number): number {
    const place = this.places[variable] as number;
    if (place === DROPPED) return this.lower[variable] as number;
    return place < 0 ? (this.values[-1 - place] as number) : this.valueOutside(place);
  }
}

type Numbers = Float64Array | Int32Array | Uint8Array;

function resized<T extends Numbers>(from: T, length: number): T {
  const to = new (from.constructor as new (length: number) => T)(length);
  to.set(from);
  return to;
}

function copyRows(from: Float64Array, fromRoom: number, to: Float64Array, toRoom: number, width: number): void {
  for (let a = 0, b = 0; a < from.length; a += fromRoom, b += toRoom) to.set(from.subarray(a, a + width), b);
}
