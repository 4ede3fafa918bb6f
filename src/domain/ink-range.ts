/** A figure that is only known within limits. */
export interface Range<T extends number = number> {
  low: T;
  likely: T;
  high: T;
}

/** A print run that cannot be; the message says what to mend. */
export class InkNeedError extends Error {
  override name = 'InkNeedError';
}
