import { DualSimplex } from './dual-simplex.ts';

/** A plan of a batch: mg of each bucket, and mg that it is worth. */
export interface Column {
  value: number;
  buckets: readonly number[];
  masses: readonly number[];
}

/** mg that the best mix is worth, and the prices at which no plan of it is worth changing. */
export interface Mix {
  prices: Float64Array<ArrayBuffer>;
  value: number;
}

const MOST_TURNS = 20;

/** The best mix of these plans: each batch has one whole plan's worth, no bucket gives too much. */
export function solveMaster(columns: readonly (readonly Column[])[], usable: readonly number[]): Mix {
  const rows = contested(columns, usable);
  const all = columns.flatMap((list, place) => list.map((column) => ({ ...column, place })));
  const height = columns.length + rows.size;
  const matrix = new Float64Array(height * all.length);
  const gains = new Float64Array(all.length);
  const unit = Math.max(1, ...all.map(({ value }) => value));
  all.forEach(({ value, place, buckets, masses }, n) => {
    gains[n] = value / unit;
    matrix[place * all.length + n] = 1;
    buckets.forEach((bucket, m) => {
      const row = rows.get(bucket);
      if (row !== undefined) matrix[row * all.length + n] = (masses[m] as number) / (usable[bucket] as number);
    });
  });
  const size = all.length + height;
  const lp = new DualSimplex(
    {
      matrix,
      gains,
      right: new Float64Array(height).fill(1),
      lower: new Float64Array(size),
      upper: new Float64Array(size).fill(1),
    },
    0,
  );
  for (let turn = 0; turn < MOST_TURNS && lp.solve() === 'cut'; turn++);
  const prices = new Float64Array(usable.length);
  rows.forEach((row, bucket) => {
    const price = (lp.multiplier(all.length + row) * unit) / (usable[bucket] as number);
    prices[bucket] = Math.min(1, Math.max(0, price));
  });
  return { prices, value: lp.objective * unit };
}

/** Bucket → row, of those that the batches could ask too much of. */
function contested(columns: readonly (readonly Column[])[], usable: readonly number[]): Map<number, number> {
  const asked = new Float64Array(usable.length);
  for (const list of columns) {
    const most = new Map<number, number>();
    for (const { buckets, masses } of list)
      buckets.forEach((bucket, m) => most.set(bucket, Math.max(most.get(bucket) ?? 0, masses[m] as number)));
    most.forEach((mass, bucket) => (asked[bucket] = (asked[bucket] as number) + mass));
  }
  const rows = new Map<number, number>();
  usable.forEach((mass, bucket) => {
    if ((asked[bucket] as number) > mass + 1) rows.set(bucket, columns.length + rows.size);
  });
  return rows;
}
