/** The sentence for what did not reach the disk. */
export function whyUnsaved(error: unknown): string {
  return error instanceof Error ? error.message : 'Not saved. Try again.';
}
