import type { Milligrams } from '#domain/mass.ts';
import { whatItCanBecome } from '#domain/what-it-can-become.ts';
import { askHighs } from './ask-highs.ts';
import { makeShop } from './fold-in-shop.ts';
import { type BookEntry, makeBook } from './formula-book.ts';
import { sayTimes, sayWhether, timeOf } from './say-target.ts';
import { shareLp } from './share-lp.ts';

const FORMULAS = 5000;
const BUCKETS = 200;
const BUCKETS_BESIDE_HIGHS = 50;
const NONE: BookEntry['tolerance'] = new Map();

/** B: every bucket of a shelf against 5,000 formulas, then some pairs beside HiGHS. */
export async function benchBecome(): Promise<void> {
  const book = makeBook(11, FORMULAS);
  const { buckets } = makeShop(12, {
    buckets: BUCKETS,
    tolerance: false,
    maximumBuckets: 3,
    worthOpening: 0 as Milligrams,
  });
  const tolerances = new Map(book.map(({ id, tolerance }) => [id, tolerance] as const));
  const withTolerance = (id: string) => tolerances.get(id) ?? NONE;
  const run = (toleranceFor: (id: string) => BookEntry['tolerance']) =>
    buckets.map((bucket) => {
      const ask = () => whatItCanBecome(bucket, book, 100 as Milligrams, toleranceFor);
      return { ms: timeOf(ask), found: ask() };
    });
  run(withTolerance);
  run(() => NONE);
  const strict = run(() => NONE);
  const tolerant = run(withTolerance);
  const times = (runs: typeof strict) => runs.map(({ ms }) => ms);
  sayTimes(`B, ${FORMULAS} formulas, same recipe`, times(strict), 5);
  sayTimes(`B, ${FORMULAS} formulas, within tolerance`, times(tolerant), 40);
  await compareWithHighs(book, buckets, strict, () => NONE);
  await compareWithHighs(book, buckets, tolerant, withTolerance);
}

type Found = ReturnType<typeof whatItCanBecome>;

/** Of some buckets the formula that takes most, the one that takes least, and one at random. */
async function compareWithHighs(
  book: readonly BookEntry[],
  buckets: ReturnType<typeof makeShop>['buckets'],
  runs: readonly { found: Found }[],
  toleranceFor: (id: string) => BookEntry['tolerance'],
): Promise<void> {
  let [equal, asked] = [0, 0];
  for (const [n, bucket] of buckets.slice(0, BUCKETS_BESIDE_HIGHS).entries()) {
    const found = runs[n]?.found ?? [];
    const ids = new Set([found[0]?.formulaId, found.at(-1)?.formulaId, book[n * 31]?.id]);
    for (const { id, target } of book.filter((entry) => ids.has(entry.id))) {
      const own = (found.find(({ formulaId }) => formulaId === id)?.largestShare ?? 0) / 1e9;
      const { objective } = await askHighs(shareLp(bucket.composition, target, toleranceFor(id)), 10);
      asked++;
      if (Math.abs(own - objective) <= 1e-6) equal++;
    }
  }
  sayWhether(`B, largest share equal to HiGHS's on ${equal} of ${asked}`, equal === asked);
}
