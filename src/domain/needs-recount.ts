/** The last operation of each install that is known for a bucket. */
export type Seen = Readonly<Record<string, number>>;

/**
 * Must the tub be weighed again? When the books hold less than nothing, or when this spend did not know of another
 * install's operation on the same tub.
 */
export function needsRecount(balanceMg: number, known: Seen, spend: { installId: string; seen: Seen }): boolean {
  if (balanceMg < 0) return true;
  return Object.entries(known).some(
    ([install, seq]) => install !== spend.installId && seq > (spend.seen[install] ?? 0),
  );
}
