import { type Fixed, fixDecisions } from './fold-in-decisions.ts';
import type { Decision, Search } from './fold-in-node.ts';
import { type LinearProgram, solveBounded } from './simplex.ts';

export interface Relaxed {
  /** mg taken of each candidate. */
  taken: Float64Array;
  /** No plan under these decisions has a greater objective (mg). */
  bound: number;
  batch: number;
}

/** Floating-point sums of up to 10⁹ mg err by far less; the bound is raised by this. */
const MARGIN = 1e-2;

interface Row {
  cells: Float64Array;
  right: number;
}

/**
 * The linear relaxation under the decisions, and a bound by weak duality from its multipliers: for any π ≥ 0 no
 * solution exceeds π·b + Σ u·max(0, c − π·A). Columns: open candidates, the batch above its least, the surplus of each
 * component over the lower edge of its tolerance. Undefined when the decisions already break a limit.
 * @param reserve mg of each component that must be left to be added fresh
 */
export function relax(search: Search, decisions: readonly Decision[], reserve: Float64Array): Relaxed | undefined {
  const fixed = fixDecisions(search, decisions);
  const program = fixed && buildProgram(search, fixed, reserve);
  if (fixed === undefined || program === undefined) return undefined;
  const optimum = solveBounded(program);
  const taken = Float64Array.from(fixed.taken);
  fixed.columns.forEach((column, n) => {
    taken[column.candidate] = (taken[column.candidate] as number) + (optimum.x[n] as number);
  });
  const ranged = search.greatest > search.least;
  const bound = weakDuality(program, optimum.duals) + fixed.value - (ranged ? search.least : 0);
  const batch = search.least + (ranged ? (optimum.x[fixed.columns.length] as number) : 0);
  return { taken, bound: bound + Math.abs(bound) * 1e-11 + MARGIN, batch };
}

function buildProgram(search: Search, fixed: Fixed, reserve: Float64Array): LinearProgram | undefined {
  const { target, tolerance, least } = search;
  const open = fixed.columns.length;
  const surplusAt = open + 1;
  const tolerant = tolerance.some((tau) => tau > 0);
  const width = surplusAt + (tolerant ? target.length : 0);
  const rows: Row[] = [];
  const addRow = (right: number, fill: (cells: Float64Array) => void) => {
    const cells = new Float64Array(width);
    fill(cells);
    rows.push({ cells, right });
  };
  let room = 1;
  let borrowed = 0;
  for (let j = 0; j < target.length; j++) {
    const most = (target[j] as number) + (tolerance[j] as number);
    const edge = Math.max(0, (target[j] as number) - (tolerance[j] as number));
    const held = fixed.contents[j] as number;
    const shares = (cells: Float64Array) =>
      fixed.columns.forEach((column, n) => (cells[n] = column.shares[j] as number));
    addRow(least * most - held - (reserve[j] as number), (cells) => {
      shares(cells);
      cells[open] = -most;
    });
    if (!tolerant) continue;
    room -= edge;
    borrowed += Math.max(0, held - least * edge);
    addRow(Math.max(0, least * edge - held), (cells) => {
      shares(cells);
      cells[open] = -edge;
      cells[surplusAt + j] = -1;
    });
  }
  if (tolerant) addRow(least * room - borrowed, (cells) => cells.fill(1, surplusAt).fill(-room, open, open + 1));
  addRow(fixed.stillOpenable, (cells) => fixed.columns.forEach((column, n) => (cells[n] = column.uses)));
  return assemble(search, fixed, rows, width);
}

/** Rows that fixed buckets have overdrawn by rounding alone count as full; a real overdraft has no solution. */
function assemble(search: Search, fixed: Fixed, rows: readonly Row[], width: number): LinearProgram | undefined {
  const slack = -1e-7 * search.greatest;
  if (rows.some((row) => row.right < slack)) return undefined;
  const objective = new Float64Array(width);
  const upper = new Float64Array(width).fill(search.greatest);
  fixed.columns.forEach((column, n) => {
    objective[n] = column.gain;
    upper[n] = column.upper;
  });
  const ranged = search.greatest > search.least;
  objective[fixed.columns.length] = ranged ? -1 : 0;
  upper[fixed.columns.length] = search.greatest - search.least;
  const matrix = new Float64Array(rows.length * width);
  rows.forEach((row, i) => matrix.set(row.cells, i * width));
  return { objective, matrix, right: Float64Array.from(rows, (row) => Math.max(0, row.right)), upper };
}

function weakDuality(program: LinearProgram, duals: Float64Array): number {
  const width = program.objective.length;
  let bound = 0;
  for (let i = 0; i < duals.length; i++) bound += (duals[i] as number) * (program.right[i] as number);
  for (let c = 0; c < width; c++) {
    let reduced = program.objective[c] as number;
    for (let i = 0; i < duals.length; i++) reduced -= (duals[i] as number) * (program.matrix[i * width + c] as number);
    if (reduced > 0) bound += reduced * (program.upper[c] as number);
  }
  return bound;
}
