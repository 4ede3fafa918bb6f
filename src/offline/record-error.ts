/** What cannot be recorded; the message says what to do. */
export class RecordError extends Error {
  override name = 'RecordError';
}
