import { v7 as uuidv7 } from 'uuid';
import type { Operation } from '#contract/operation.ts';
import type { OperationBody } from '#contract/operation-bodies.ts';
import { findKey, putKey } from './outbox-keys.ts';
import type { QueuedOperation } from './outbox.ts';
import { RecordError } from './record-error.ts';
import { type Entry, type RecordDeps, enqueue } from './record-operation.ts';
import type { Station } from './station.ts';
import { withRoom } from './with-room.ts';

const here: RecordDeps = { now: () => new Date(), randomId: uuidv7 };

/** Queues `body` in the place of a refused entry, which is let go in the same transaction. @throws RecordError */
export function correctEntry(
  station: Station,
  opId: string,
  body: OperationBody,
  deps: RecordDeps = here,
): Promise<Operation> {
  return settleEntry(station, opId, body, deps, (refused) => ({ seen: refused.operation.seen, supersedes: opId }));
}

/** Lets a refused entry go and queues that this was done, and why. @throws RecordError */
export async function dropEntry(
  station: Station,
  opId: string,
  reason: string,
  deps: RecordDeps = here,
): Promise<Operation> {
  const why = reason.trim();
  if (why === '') throw new RecordError('Not dropped: say why.');
  return settleEntry(station, opId, { type: 'entry-dropped', body: { opId, reason: why } }, deps, () => ({ seen: {} }));
}

type Parts = Omit<Entry, 'opId'>;

function settleEntry(
  station: Station,
  opId: string,
  body: OperationBody,
  deps: RecordDeps,
  partsOf: (refused: QueuedOperation) => Parts,
): Promise<Operation> {
  const { outbox } = station;
  const settling = deps.randomId();
  return withRoom(station, deps.now(), () =>
    outbox.transaction('rw', outbox.ops, outbox.keys, async () => {
      const queued = await outbox.ops.get(settling);
      if (queued !== undefined) return queued.operation;
      const refused = await outbox.ops.get(opId);
      if (refused?.status !== 'rejected') throw new RecordError('This was decided already.');
      const operation = await enqueue(station, body, { opId: settling, ...partsOf(refused) }, deps);
      await outbox.ops.update(opId, { status: 'dropped' });
      return operation;
    }),
  );
}

/** True until a drop has been put on the wire: from then on the server may have it. */
export function canTakeBack({ operation, status, triedAt }: QueuedOperation): boolean {
  return operation.type === 'entry-dropped' && status === 'waiting' && triedAt === undefined;
}

/** The dropped entry needs a decision again, as if nothing had been done. @throws RecordError */
export async function takeBackDrop(station: Station, dropId: string): Promise<void> {
  const { outbox } = station;
  await outbox.transaction('rw', outbox.ops, outbox.keys, async () => {
    const drop = await outbox.ops.get(dropId);
    if (drop?.operation.type !== 'entry-dropped' || !canTakeBack(drop))
      throw new RecordError('This has been sent and cannot be taken back.');
    await outbox.ops.delete(dropId);
    await outbox.ops.update(drop.operation.body.opId, { status: 'rejected' });
    // The last number is given again, so that no gap looks like a lost entry.
    if ((await findKey(outbox, 'deviceSeq')) === drop.deviceSeq) await putKey(outbox, 'deviceSeq', drop.deviceSeq - 1);
  });
}
