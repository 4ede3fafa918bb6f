import { type Weighing, weighing as weighingSchema } from '#contract/weighing.ts';
import { RecordError } from './record-error.ts';
import { reopening } from './reopening.ts';
import type { Station } from './station.ts';
import { withRoom } from './with-room.ts';

/**
 * Every step is on the disk before it is shown as done.
 * @param after what this tab showed; when another tab has gone on meanwhile, nothing is saved
 * @throws RecordError
 */
export async function saveWeighing(
  station: Station,
  weighing: Weighing,
  after?: Weighing,
  now: Date = new Date(),
): Promise<void> {
  const whole = weighingSchema.parse(weighing) as Weighing;
  const { weighings } = station.outbox;
  savedHere.set(whole.id, whole.updatedAt);
  await withRoom(station, now, () =>
    station.outbox.transaction('rw', weighings, async () => {
      const stored = await weighings.get(whole.id);
      // Written before, and its answer was lost.
      if (stored !== undefined && isSameState(stored, whole)) return;
      if (after !== undefined) requireState(stored, after);
      await weighings.put(whole);
    }),
  );
}

/** Of each batch the state that this tab saved last. */
const savedHere = new Map<string, string>();

/** True when this tab itself brought the batch to this state. */
export function wasSavedHere({ id, updatedAt }: Weighing): boolean {
  return savedHere.get(id) === updatedAt;
}

/** Two tabs may show one batch: who is behind looks first. @throws RecordError */
export function requireState(stored: Weighing | undefined, shown: Weighing): void {
  if (stored === undefined) throw new RecordError('This batch is finished already. Open the Bench.');
  if (!isSameState(stored, shown))
    throw new RecordError('Not saved: this batch went on in another tab of this device. Look at its steps again.');
}

function isSameState(a: Weighing, b: Weighing): boolean {
  return a.updatedAt === b.updatedAt && a.additions.length === b.additions.length;
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
