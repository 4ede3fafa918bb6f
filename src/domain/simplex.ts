/** max c·x with A·x ≤ b, 0 ≤ x ≤ u. Dense, bounded, primal; starts from slacks, and from a penalty where b < 0. */
export interface LinearProgram {
  objective: Float64Array;
  /** Row by row, `rows` × `columns`. */
  matrix: Float64Array;
  right: Float64Array;
  upper: Float64Array;
}

export interface LinearOptimum {
  x: Float64Array;
  /** One a row, ≥ 0: multipliers for a bound by weak duality. */
  duals: Float64Array;
}

const EPSILON = 1e-9;
/** What a unit of a broken condition costs: far more than any objective of a batch gains. */
const PENALTY = 1e5;
/** In place of a column in the basis: the penalised amount by which a row is broken. It never comes back. */
const BROKEN = -1;

/** A floating-point optimum: good enough to steer a search, never to call a plan good. */
export function solveBounded(program: LinearProgram): LinearOptimum {
  const tableau = new Tableau(program);
  const most = 50 * (program.right.length + program.objective.length);
  for (let n = 0; n < most && tableau.pivot(n > most / 2); n++);
  return tableau.optimum();
}

/** Rows of [A | I | b] in the basis; nonbasic columns at their upper bound are complemented. */
class Tableau {
  private readonly rows: number;
  private readonly width: number;
  private readonly cells: Float64Array;
  private readonly costs: Float64Array;
  private readonly bounds: Float64Array;
  private readonly flipped: Uint8Array;
  private readonly basis: Int32Array;
  private readonly inBasis: Uint8Array;
  private readonly columns: number;

  constructor(program: LinearProgram) {
    const m = program.right.length;
    const n = program.objective.length;
    this.rows = m;
    this.columns = n;
    this.width = n + m + 1;
    this.cells = new Float64Array(m * this.width);
    this.costs = new Float64Array(this.width);
    this.bounds = new Float64Array(n + m).fill(Infinity);
    this.flipped = new Uint8Array(n + m);
    this.basis = new Int32Array(m);
    this.inBasis = new Uint8Array(n + m);
    this.bounds.set(program.upper);
    this.costs.set(program.objective);
    for (let i = 0; i < m; i++) this.addRow(program, i);
  }

  private addRow(program: LinearProgram, i: number): void {
    const n = this.columns;
    const at = i * this.width;
    this.cells.set(program.matrix.subarray(i * n, (i + 1) * n), at);
    this.cells[at + n + i] = 1;
    this.cells[at + this.width - 1] = program.right[i] as number;
    this.basis[i] = n + i;
    this.inBasis[n + i] = 1;
    if ((program.right[i] as number) >= 0) return;
    for (let k = 0; k < this.width; k++) this.cells[at + k] = -(this.cells[at + k] as number);
    for (let k = 0; k < this.width; k++)
      this.costs[k] = (this.costs[k] as number) + PENALTY * (this.cells[at + k] as number);
    this.basis[i] = BROKEN;
    this.inBasis[n + i] = 0;
  }

  /** One step towards the optimum; false when there is none. `bland` ends cycles. */
  pivot(bland: boolean): boolean {
    const entering = this.entering(bland);
    if (entering === -1) return false;
    const { row, step, toUpper } = this.leaving(entering);
    if (step === Infinity) return false;
    if (row === -1) {
      this.complement(entering);
      return true;
    }
    if (toUpper) this.complementBasic(row);
    this.exchange(row, entering);
    return true;
  }

  private entering(bland: boolean): number {
    let best = -1;
    let gain = EPSILON;
    for (let j = 0; j < this.width - 1; j++) {
      if (this.inBasis[j] || this.bounds[j] === 0) continue;
      const cost = this.costs[j] as number;
      if (cost > gain) {
        best = j;
        if (bland) return j;
        gain = cost;
      }
    }
    return best;
  }

  /** The first basic variable to hit a bound, or the entering one's own bound (row −1). */
  private leaving(j: number): { row: number; step: number; toUpper: boolean } {
    let found = { row: -1, step: this.bounds[j] as number, toUpper: false };
    for (let i = 0; i < this.rows; i++) {
      const a = this.cells[i * this.width + j] as number;
      const value = this.cells[i * this.width + this.width - 1] as number;
      if (a > EPSILON) {
        const step = Math.max(0, value) / a;
        if (step < found.step) found = { row: i, step, toUpper: false };
      } else if (a < -EPSILON) {
        const bound = this.bounds[this.basis[i] as number];
        if (bound === undefined || bound === Infinity) continue;
        const step = Math.max(0, bound - value) / -a;
        if (step < found.step) found = { row: i, step, toUpper: true };
      }
    }
    return found;
  }

  /** x_j := u_j − x_j for a nonbasic column. */
  private complement(j: number): void {
    const bound = this.bounds[j] as number;
    for (let i = 0; i < this.rows; i++) {
      const at = i * this.width;
      const a = this.cells[at + j] as number;
      this.cells[at + this.width - 1] = (this.cells[at + this.width - 1] as number) - a * bound;
      this.cells[at + j] = -a;
    }
    this.costs[j] = -(this.costs[j] as number);
    this.flipped[j] = this.flipped[j] ? 0 : 1;
  }

  /** x_B := u_B − x_B for the basic variable of a row. */
  private complementBasic(row: number): void {
    const j = this.basis[row] as number;
    const at = row * this.width;
    for (let k = 0; k < this.width - 1; k++) if (k !== j) this.cells[at + k] = -(this.cells[at + k] as number);
    this.cells[at + this.width - 1] = (this.bounds[j] as number) - (this.cells[at + this.width - 1] as number);
    this.flipped[j] = this.flipped[j] ? 0 : 1;
  }

  private exchange(row: number, j: number): void {
    const at = row * this.width;
    const pivot = this.cells[at + j] as number;
    for (let k = 0; k < this.width; k++) this.cells[at + k] = (this.cells[at + k] as number) / pivot;
    for (let i = 0; i < this.rows; i++) if (i !== row) this.eliminate(this.cells, i * this.width, at, j);
    this.eliminate(this.costs, 0, at, j);
    if (this.basis[row] !== BROKEN) this.inBasis[this.basis[row] as number] = 0;
    this.inBasis[j] = 1;
    this.basis[row] = j;
  }

  private eliminate(into: Float64Array, offset: number, at: number, j: number): void {
    const factor = into[offset + j] as number;
    if (factor === 0) return;
    for (let k = 0; k < this.width; k++) {
      into[offset + k] = (into[offset + k] as number) - factor * (this.cells[at + k] as number);
    }
    into[offset + j] = 0;
  }

  optimum(): LinearOptimum {
    const values = new Float64Array(this.width - 1);
    for (let i = 0; i < this.rows; i++) {
      if (this.basis[i] === BROKEN) continue;
      values[this.basis[i] as number] = this.cells[i * this.width + this.width - 1] as number;
    }
    const x = values.slice(0, this.columns);
    for (let j = 0; j < this.columns; j++) if (this.flipped[j]) x[j] = (this.bounds[j] as number) - (x[j] as number);
    const duals = new Float64Array(this.rows);
    for (let i = 0; i < this.rows; i++) duals[i] = Math.max(0, -(this.costs[this.columns + i] as number));
    return { x, duals };
  }
}
