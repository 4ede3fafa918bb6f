import { type Weighing, weighing as weighingSchema } from '#contract/weighing.ts';
import { reopening } from './reopening.ts';
import type { Station } from './station.ts';
import { withRoom } from './with-room.ts';

/** Every step is on the disk before it is shown as done. @throws RecordError */
export async function saveWeighing(station: Station, weighing: Weighing, now: Date = new Date()): Promise<void> {
  const whole = weighingSchema.parse(weighing) as Weighing;
  await withRoom(station, now, () => station.outbox.weighings.put(whole));
}

export function findWeighing(station: Station, id: string): Promise<Weighing | undefined> {
  return reopening([station.outbox], () => station.outbox.weighings.get(id));
}

/** Open batches, the one touched last first. */
export async function listWeighings(station: Station): Promise<Weighing[]> {
  const open = await reopening([station.outbox], () => station.outbox.weighings.toArray());
  return open.sort((a, b) => b.updatedAt.localeCompare(a.updatedAt));
}

export async function removeWeighing(station: Station, id: string): Promise<void> {
  await reopening([station.outbox], () => station.outbox.weighings.delete(id));
}
