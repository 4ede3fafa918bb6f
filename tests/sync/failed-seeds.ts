/** Seeds that once showed a mistake; they are run every time. */
export const failedSeeds: readonly number[] = [
  // A station whose clock was set back under a Retry-After never sent again.
  1,
  // Between the pages of a pull a tub showed less than the entries that its position counted as contained.
  3,
];
