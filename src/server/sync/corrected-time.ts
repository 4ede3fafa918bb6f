import type { Operation } from '#contract/operation.ts';

/** The device's time with the offset of its last contact, never after it was received. */
export function correctedTime(operation: Operation, receivedAt: Date): Date {
  const corrected = new Date(operation.deviceTime).getTime() + operation.clock.offsetMs;
  return new Date(Math.min(corrected, receivedAt.getTime()));
}
