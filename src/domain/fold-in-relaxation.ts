import { type Bound, type Certificate, boundOf } from './fold-in-bound.ts';
import type { Search } from './fold-in-candidates.ts';
import { type Decisions, type Row, edgeRows, excessRow, reserveOf } from './fold-in-rows.ts';
import { WHOLE } from './mass.ts';
import { type LinearProgram, solveBounded } from './simplex.ts';

export interface Relaxed {
  certificate: Certificate;
  bound: Bound;
  /** mg taken of each candidate, and the batch: floating, to start rounding from. */
  taken: Float64Array;
  batch: number;
  /** mg of each component that these bring. */
  held: Float64Array;
  /** Sets of components in excess that mattered. */
  excesses: readonly (readonly boolean[])[];
  /** How many decisions it stands under, and the size of its program. */
  depth: number;
  cells: number;
}

const MOST_CUTS = 12;
/** mg of the batch by which a condition may be broken before it is added. */
const BROKEN = 0.5;

/** The linear relaxation under the decisions; conditions on excess are added as they are broken. */
export function relax(search: Search, decisions: Decisions, known: Relaxed['excesses']): Relaxed {
  const edges = edgeRows(search, decisions);
  const tolerant = search.components.some((_, j) => search.lower[j] !== search.upper[j]);
  const excesses = [...known];
  const columns = columnsOf(search, decisions);
  for (let cuts = 0; ; cuts++) {
    const rows = [...edges, ...excesses.map((excess) => excessRow(search, decisions, excess))];
    const found = optimise(search, decisions, rows, columns);
    const excess = tolerant && cuts < MOST_CUTS ? brokenExcess(search, decisions, found) : undefined;
    if (excess === undefined || excesses.some((other) => other.every((over, j) => over === excess[j]))) {
      const certificate = { decisions, rows, multipliers: found.multipliers };
      const mattered = excesses.filter((_, n) => (found.multipliers[edges.length + n] as number) > 0);
      const depth = countDecided(decisions);
      const cells = rows.length * columns.length * (cuts + 1);
      return { ...found, certificate, bound: boundOf(search, certificate), excesses: mattered, depth, cells };
    }
    excesses.push(excess);
  }
}

function countDecided({ buckets, fresh }: Decisions): number {
  return (
    buckets.reduce((sum, decision) => sum + Number(decision === 'emptied' || decision === 'partial'), 0) +
    fresh.reduce((sum, decision) => sum + Number(decision !== 'free'), 0)
  );
}

interface Column {
  candidate: number;
  gain: number;
  from: number;
  upper: number;
  /** Of one bucket count for each mg. */
  uses: number;
}

function columnsOf(search: Search, { buckets }: Decisions): Column[] {
  const worth = search.problem.worthOpening;
  return search.candidates.flatMap(({ usable, most, canEmpty }, n): Column[] => {
    const decision = buckets[n];
    if (decision === 'closed') return [];
    if (decision === 'emptied') return [{ candidate: n, gain: 0, from: usable, upper: 0, uses: 0 }];
    const from = search.minimum;
    if (decision === 'partial') return [{ candidate: n, gain: 1, from, upper: most - from, uses: 0 }];
    const upper = canEmpty ? usable : most;
    return [{ candidate: n, gain: 1 - worth / upper, from: 0, upper, uses: 1 / upper }];
  });
}

type Optimum = Pick<Relaxed, 'taken' | 'batch' | 'held'> & { multipliers: number[] };

function optimise(search: Search, decisions: Decisions, rows: readonly Row[], columns: readonly Column[]): Optimum {
  const scales = rows.map((row) => (row.ppb === 0 ? 1 : WHOLE / Math.abs(row.ppb)));
  const { x, duals } = solveBounded(programOf(search, decisions, rows, scales, columns));
  const taken = new Float64Array(search.candidates.length);
  const held = new Float64Array(search.components.length);
  columns.forEach(({ candidate, from }, n) => {
    const mass = from + (x[n] as number);
    taken[candidate] = mass;
    addShares(search, candidate, mass, held);
  });
  const multipliers = scales.map((scale, n) => (duals[n] as number) * scale);
  return { taken, held, batch: search.least + (x[columns.length] ?? 0), multipliers };
}

/** Columns: what is taken of each candidate beyond its `from`, then the batch beyond its least. Last row: the count. */
function programOf(
  search: Search,
  decisions: Decisions,
  rows: readonly Row[],
  scales: readonly number[],
  columns: readonly Column[],
): LinearProgram {
  const width = columns.length + 1;
  const matrix = new Float64Array((rows.length + 1) * width);
  const right = new Float64Array(rows.length + 1);
  rows.forEach((row, i) => {
    const scale = scales[i] as number;
    let rest = (search.least * row.ppb) / WHOLE - row.reserve;
    columns.forEach(({ candidate, from }, n) => {
      const cell = cellOf(search, row, candidate);
      rest -= cell * from;
      matrix[i * width + n] = cell * scale;
    });
    matrix[i * width + columns.length] = (-row.ppb / WHOLE) * scale;
    right[i] = Math.abs(rest * scale) < 1e-6 ? 0 : rest * scale;
  });
  columns.forEach(({ uses }, n) => (matrix[rows.length * width + n] = uses));
  const opened = decisions.buckets.filter((decision) => decision === 'emptied' || decision === 'partial').length;
  right[rows.length] = Math.max(0, search.problem.maximumBuckets - opened);
  const range = search.greatest - search.least;
  return {
    objective: Float64Array.from([...columns.map(({ gain }) => gain), range > 0 ? -1 : 0]),
    upper: Float64Array.from([...columns.map(({ upper }) => upper), range]),
    matrix,
    right,
  };
}

function cellOf(search: Search, row: Row, candidate: number): number {
  const shares = search.candidates[candidate]?.shares ?? new Float64Array();
  let cell = row.each;
  for (let j = 0; j < shares.length; j++) cell += (row.weights[j] as number) * (shares[j] as number);
  return cell;
}

function addShares(search: Search, candidate: number, mass: number, held: Float64Array): void {
  search.candidates[candidate]?.shares.forEach((share, j) => (held[j] = (held[j] as number) + mass * share));
}

/** The components in excess, where what is over in them does not fit beside the lower edges of the others. */
function brokenExcess(search: Search, { fresh }: Decisions, { held, batch }: Optimum): boolean[] | undefined {
  let sum = 0;
  const excess = search.components.map((_, j) => {
    const edge = (batch * (search.lower[j] as number)) / WHOLE;
    const brought = (held[j] as number) + reserveOf(search, fresh, j);
    sum += Math.max(edge, brought);
    return brought > edge;
  });
  return sum > batch + BROKEN ? excess : undefined;
}
