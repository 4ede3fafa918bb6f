import * as z from 'zod/mini';
import { instant, note } from './identifiers.ts';

const count = z.int().check(z.minimum(0), z.maximum(1_000_000));
/** Whole milligrams of many batches together, at most a thousand tonnes. */
const totalMilligrams = z.int().check(z.minimum(0), z.maximum(1e15));

/** A shift as its station showed it when it was handed in; masses in mg. `from` is included, `to` is not. */
export const shiftReported = z.strictObject({
  from: instant,
  to: instant,
  batches: count,
  mixedMg: totalMilligrams,
  reusedMg: totalMilligrams,
  /** On this station; what others discarded is in their own logs. */
  discards: count,
  discardedMg: totalMilligrams,
  openPoints: z.strictObject({
    /** Logs not sent, summaries not counted. */
    waiting: count,
    refused: count,
    recounts: count,
    unreleased: count,
    atPress: count,
  }),
  note: z.nullable(note),
});
