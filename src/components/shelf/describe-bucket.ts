import { ageInDays } from '#components/ui/format-time.ts';
import type { Row } from '#contract/rows.ts';

type Tub = Row<'buckets'>;

/** `short`: where the word stands beside others in a row. */
export const GRADES: Record<Tub['grade'], { word: string; short: string; glyph: string }> = {
  untouched: { word: 'Untouched', short: 'Untouched', glyph: 'g-ok' },
  returned: { word: 'Returned', short: 'Returned', glyph: 'g-return' },
  assumed: { word: 'Content assumed', short: 'Assumed', glyph: 'g-ask' },
  unknown: { word: 'Content unknown', short: 'Unknown', glyph: 'g-ask' },
};

export interface PlaceNames {
  locations: ReadonlyMap<string, Row<'locations'>>;
  jobs: ReadonlyMap<string, Row<'jobs'>>;
}

/** Where a tub is, in the room's words. */
export function placeOf(tub: Tub, { locations, jobs }: PlaceNames): string {
  const shelf = tub.locationId === null ? undefined : locations.get(tub.locationId)?.code;
  if (tub.state === 'at-press') {
    const job = tub.jobId === null ? undefined : jobs.get(tub.jobId)?.number;
    return job === undefined ? 'At press' : `At press for ${job}`;
  }
  if (tub.state === 'quarantine') return shelf === undefined ? 'Quarantine' : `Quarantine, ${shelf}`;
  if (tub.state === 'empty') return 'Empty';
  if (tub.state === 'discarded') return 'Discarded';
  return shelf ?? 'No place yet';
}

/** "today", "1 day", "12 days" since it was filled. */
export function ageOf(tub: Tub, now: Date): string {
  const days = ageInDays(tub.filledAt, now);
  if (days === 0) return 'today';
  return days === 1 ? '1 day' : `${days} days`;
}

/** True from the day after its use-by. */
export function isPastUseBy(tub: Tub, now: Date): boolean {
  return tub.useBy !== null && tub.useBy.slice(0, 10) < now.toISOString().slice(0, 10);
}

/** The largest shares first, and how many others there are. */
export function largestShares(tub: Tub, most: number): { shares: Tub['composition']; others: number } {
  const shares = tub.composition.toSorted((a, b) => b.ppb - a.ppb);
  return { shares: shares.slice(0, most), others: Math.max(0, shares.length - most) };
}
