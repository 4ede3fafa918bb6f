import type { Grade } from './compatibility.ts';
import type { TubEffect } from './tub-trace.ts';

const NOTHING: TubEffect = { deltaMg: 0, content: null, tells: {}, cameBack: false, foundInk: false };

/** What a scale said of a tub; the change was fixed there. All in mg. */
interface Weighed {
  grossMg: number;
  tareMg: number;
  deltaMg: number;
}

export function issuedTub({ jobId }: { jobId: string | null }): TubEffect {
  return { ...NOTHING, tells: { state: 'at-press', jobId, locationId: null } };
}

/** Back from the press: quarantine when dirty, empty when the scale says so. */
export function returnedTub(
  body: Weighed & { condition: string; locationId: string | null; jobId: string | null },
): TubEffect {
  const { grossMg, tareMg, deltaMg, locationId, jobId } = body;
  const state = body.condition === 'dirty' ? 'quarantine' : grossMg === tareMg ? 'empty' : 'shelf';
  const tells = { state, tareMg, locationId, ...(jobId === null ? {} : { jobId }) } as const;
  return { deltaMg, content: 'spend-weighed', tells, cameBack: true, foundInk: false };
}

export function relocatedTub({ locationId }: { locationId: string }): TubEffect {
  return { ...NOTHING, tells: { locationId } };
}

/** A tub that was down as empty or discarded and holds ink stands on the shelf again. */
export function recountedTub({ grossMg, tareMg, deltaMg }: Weighed): TubEffect {
  return { ...NOTHING, deltaMg, content: 'recount', tells: { tareMg }, foundInk: grossMg > tareMg };
}

/** What was shown leaves the books, not what they hold when this arrives. */
export function discardedTub({ displayedMg }: { displayedMg: number }): TubEffect {
  return { ...NOTHING, deltaMg: -displayedMg, content: 'discard', tells: { state: 'discarded' } };
}

/** What is taken from a tub into a batch; `displayed` is what the station showed of it. */
export interface Taken {
  actualMg: number;
  /** Scraped empty. */
  empties: boolean;
  displayed?: { balanceMg: number; grade: Grade; generation: number } | undefined;
}

/** The rest of what was shown of a scraped tub stays on its wall. @param shownMg less what this batch took from it before */
export function takenFromTub({ actualMg, empties }: Omit<Taken, 'displayed'>, shownMg: number): TubEffect {
  if (!empties) return { ...NOTHING, deltaMg: -actualMg, content: 'spend' };
  return { ...NOTHING, deltaMg: -shownMg, content: 'spend-weighed', tells: { state: 'empty', locationId: null } };
}

/** A tub's grade and generation when it was taken from, as they were shown; unknown content stays unknown. */
export function gradeWhenTaken<T extends { grade: Grade; generation: number }>(
  tub: T,
  { displayed }: Pick<Taken, 'displayed'>,
): T {
  if (displayed === undefined) return tub;
  const isKnown = tub.grade === 'untouched' || tub.grade === 'returned';
  const wasUntouched = displayed.grade === 'untouched' && displayed.generation === 0;
  const grade = !isKnown ? tub.grade : wasUntouched ? 'untouched' : 'returned';
  return { ...tub, grade, generation: displayed.generation };
}
