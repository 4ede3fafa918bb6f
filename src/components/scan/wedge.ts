/** A wedge scanner types faster than a hand: this long between two keys, at most. */
export const WEDGE_GAP_MS = 30;
const LEAST = 8;

/** What came in one fast run so far; `at`: when its last key came, ms. */
export interface WedgeRun {
  text: string;
  at: number;
}
export const NO_RUN: WedgeRun = { text: '', at: Number.NEGATIVE_INFINITY };

/** One key more: the run goes on, starts anew, or ends with Enter as a scanned code. */
export function readWedge(run: WedgeRun, key: string, at: number): { run: WedgeRun; scanned?: string } {
  const fast = at - run.at <= WEDGE_GAP_MS;
  if (key === 'Enter') return fast && run.text.length >= LEAST ? { run: NO_RUN, scanned: run.text } : { run: NO_RUN };
  // Shift comes between the capitals of an address and types nothing.
  if (key.length !== 1) return { run };
  return { run: { text: fast ? run.text + key : key, at } };
}
