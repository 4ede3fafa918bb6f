import type { Milligrams } from '#domain/mass.ts';
import { type Ask, makeShop } from './fold-in-shop.ts';

const grams = (mass: number) => (mass * 1000) as Milligrams;

/** Buckets on the shelf of the shops that are asked. */
export const SIZES = [20, 100, 500] as const;

/** What is asked of shops with so many buckets: same recipe and tolerance, K = 3, 6 and unlimited, κ = 0 and 100 g. */
export function asksOf(buckets: number): Ask[] {
  return [false, true].flatMap((tolerance) =>
    [3, 6, buckets].flatMap((maximumBuckets) =>
      [0, 100].map((worth) => ({ buckets, tolerance, maximumBuckets, worthOpening: grams(worth) })),
    ),
  );
}

export function nameOf({ buckets, tolerance, maximumBuckets, worthOpening }: Ask): string {
  const count = maximumBuckets >= buckets ? 'any' : String(maximumBuckets);
  return `N=${String(buckets).padEnd(3)} ${tolerance ? 'tolerance  ' : 'same recipe'} K=${count.padEnd(3)} κ=${String(worthOpening / 1000).padEnd(3)} g`;
}

/** Seeds that the measured ones do not use: what runs first is not yet compiled. */
export function warmUp(run: (problem: ReturnType<typeof makeShop>) => void): void {
  for (let n = 0; n < 3; n++) for (const ask of asksOf(100)) run(makeShop(1000 + n, ask));
}

/** p95 in ms that core mathematics A asks of this row, on a 2-core machine in Node 20; undefined where it asks none. */
export function targetOf({ buckets, tolerance, maximumBuckets }: Ask): number | undefined {
  if (buckets === 100) return tolerance ? 150 : 2;
  return buckets === 500 && maximumBuckets <= 3 ? 300 : undefined;
}
