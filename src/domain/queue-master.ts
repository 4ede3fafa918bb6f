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

/** mg that a mg costs which stays in a bucket that must be used up: beyond what prices need to reach. */
const MUST = 10;

/** The best mix of these plans: each batch has one whole plan's worth, no bucket gives too much, those that must give all. */
export function solveMaster(
  columns: readonly (readonly Column[])[],
  usable: readonly number[],
  musts: ReadonlySet<number>,
): Mix {
  const rows = contested(columns, usable, musts);
  const all = columns.flatMap((list, place) => list.map((column) => ({ ...column, place })));
  const width = all.length + musts.size;
  const height = columns.length + rows.size;
  const matrix = new Float64Array(height * width);
  const gains = new Float64Array(width);
  const unit = Math.max(1, ...all.map(({ value }) => value));
  all.forEach(({ value, place, buckets, masses }, n) => {
    gains[n] = value / unit;
    matrix[place * width + n] = 1;
    buckets.forEach((bucket, m) => {
      const row = rows.get(bucket);
      if (row !== undefined) matrix[row * width + n] = (masses[m] as number) / (usable[bucket] as number);
    });
  });
  const upper = new Float64Array(width + height).fill(1);
  [...musts].forEach((bucket, n) => {
    const row = rows.get(bucket) as number;
    matrix[row * width + all.length + n] = 1;
    gains[all.length + n] = (-MUST * (usable[bucket] as number)) / unit;
    upper[width + row] = 0;
  });
  const right = new Float64Array(height).fill(1);
  const lp = new DualSimplex({ matrix, gains, right, lower: new Float64Array(width + height), upper }, 0);
  for (let turn = 0; turn < MOST_TURNS && lp.solve() === 'cut'; turn++);
  const prices = new Float64Array(usable.length);
  rows.forEach((row, bucket) => {
    const price = (lp.multiplier(width + row) * unit) / (usable[bucket] as number);
    prices[bucket] = Math.min(1, Math.max(musts.has(bucket) ? -MUST : 0, price));
  });
  return { prices, value: lp.objective * unit };
}

/** Bucket → row, of those that the batches could ask too much of, and those that must be used up. */
function contested(
  columns: readonly (readonly Column[])[],
  usable: readonly number[],
  musts: ReadonlySet<number>,
): Map<number, number> {
  const asked = new Float64Array(usable.length);
  for (const list of columns) {
    const most = new Map<number, number>();
    for (const { buckets, masses } of list)
      buckets.forEach((bucket, m) => most.set(bucket, Math.max(most.get(bucket) ?? 0, masses[m] as number)));
    most.forEach((mass, bucket) => (asked[bucket] = (asked[bucket] as number) + mass));
  }
  const rows = new Map<number, number>();
  usable.forEach((mass, bucket) => {
    if (musts.has(bucket) || (asked[bucket] as number) > mass + 1) rows.set(bucket, columns.length + rows.size);
  });
  return rows;
}
