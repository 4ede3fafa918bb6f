import { v7 as uuidv7 } from 'uuid';
import {
  type Operation,
  type SeenByBucket,
  LARGEST_OPERATION_BYTES,
  operation as operationSchema,
} from '#contract/operation.ts';
import type { OperationBody } from '#contract/operation-bodies.ts';
import { mayRecord } from '#contract/roles.ts';
import type { Weighing } from '#contract/weighing.ts';
import { makeBucketCode } from '#domain/bucket-code.ts';
import { hasLapsed } from './grant-age.ts';
import { findKey, nextOf } from './outbox-keys.ts';
import type { Outbox } from './outbox.ts';
import { RecordError } from './record-error.ts';
import { reopening } from './reopening.ts';
import type { Station } from './station.ts';
import { touchedBuckets, tubsOf } from './touched-buckets.ts';
import { requireState } from './weighings.ts';
import { withRoom } from './with-room.ts';

export interface RecordDeps {
  now: () => Date;
  randomId: () => string;
}
const here: RecordDeps = { now: () => new Date(), randomId: uuidv7 };

/** Queues the operation; what is shown is the cache folded with the queue, so nothing else is written. @throws RecordError */
export async function recordOperation(
  station: Station,
  body: OperationBody,
  deps: RecordDeps = here,
): Promise<Operation> {
  const { outbox } = station;
  const entry = await beginEntry(station, body, deps);
  return withRoom(station, deps.now(), () =>
    outbox.transaction('rw', outbox.ops, outbox.keys, async () => enqueue(station, body, entry, deps)),
  );
}

/** Closes an open batch: its operation is queued and the weighing removed in one transaction. @throws RecordError */
export async function finishWeighing(
  station: Station,
  weighing: Weighing,
  body: OperationBody,
  deps: RecordDeps = here,
): Promise<Operation> {
  const { outbox } = station;
  const entry = await beginEntry(station, body, deps);
  return withRoom(station, deps.now(), () =>
    outbox.transaction('rw', outbox.ops, outbox.keys, outbox.weighings, async () => {
      const queued = await outbox.ops.get(entry.opId);
      if (queued !== undefined) return queued.operation;
      requireState(await outbox.weighings.get(weighing.id), weighing);
      await outbox.weighings.delete(weighing.id);
      return enqueue(station, body, entry, deps);
    }),
  );
}

/** The next tub code of this install; each is given once. @throws RecordError */
export async function takeBucketCode(station: Station, now: Date = new Date()): Promise<string> {
  const { outbox } = station;
  const counter = await withRoom(station, now, () =>
    outbox.transaction('rw', outbox.keys, async () => nextOf(outbox, 'tubCounter')),
  );
  return makeBucketCode(station.codePrefix, counter);
}

/** What stays the same however often the entry is tried: its id, so that it is not written twice, and what was seen. */
export interface Entry {
  opId: string;
  /** Of a correction: what the refused entry had seen, for its figures were fixed then. */
  seen: SeenByBucket;
  supersedes?: string;
}

async function beginEntry(station: Station, body: OperationBody, deps: RecordDeps): Promise<Entry> {
  const seen = await reopening([station.cache], () => seenNow(station, body));
  return { opId: deps.randomId(), seen };
}

/** Inside the caller's transaction on `ops` and `keys`. @throws RecordError */
export async function enqueue(
  station: Station,
  body: OperationBody,
  { opId, seen, supersedes }: Entry,
  deps: RecordDeps,
): Promise<Operation> {
  const { outbox, person } = station;
  const queued = await outbox.ops.get(opId);
  if (queued !== undefined) return queued.operation;
  if (!mayRecord(person.role, body.type)) {
    throw new RecordError(`Not saved: this is not for the role of ${person.role}. Ask a manager.`);
  }
  const clock = (await findKey(outbox, 'clock')) ?? { offsetMs: 0, uncertaintyMs: 0, lastContact: null };
  const now = deps.now();
  const recordedAt = now.toISOString();
  const operation = {
    opId,
    installId: station.installId,
    deviceSeq: await nextOf(outbox, 'deviceSeq'),
    opVersion: 1 as const,
    actorId: person.id,
    grantId: station.grant.id,
    grantLapsed: hasLapsed(station.grant.expiresAt, clock, now),
    deviceTime: recordedAt,
    clock,
    seen: supersedes === undefined ? await withPending(outbox, seen) : seen,
    ...(supersedes === undefined ? {} : { supersedes }),
    ...body,
  } satisfies Operation;
  requireRecordable(operation);
  await outbox.ops.add({
    opId,
    deviceSeq: operation.deviceSeq,
    operation,
    tubs: tubsOf(operation),
    status: 'waiting',
    changeSeq: null,
    problem: null,
    recordedAt,
    sentAt: null,
  });
  return operation;
}

function requireRecordable(operation: Operation): void {
  const parsed = operationSchema.safeParse(operation);
  if (!parsed.success) {
    const issue = parsed.error.issues[0];
    throw new RecordError(`Not saved: ${issue?.path.join('.') ?? 'entry'}: ${issue?.message ?? 'not valid'}`);
  }
  if (new TextEncoder().encode(JSON.stringify(operation)).length > LARGEST_OPERATION_BYTES) {
    throw new RecordError('Not saved: the entry is too large. Split it.');
  }
}

/** What the cache knows of each touched bucket: the last operation of every install. */
async function seenNow(station: Station, body: OperationBody): Promise<SeenByBucket> {
  const ids = touchedBuckets(body);
  const rows = await station.cache.rows('buckets').bulkGet(ids);
  return Object.fromEntries(ids.map((id, n) => [id, { ...rows[n]?.seen }]));
}

/** What this device holds is known too, but for what the server refused. */
async function withPending(outbox: Outbox, seen: SeenByBucket): Promise<SeenByBucket> {
  const known = structuredClone(seen);
  const queued = await outbox.ops.where('tubs').anyOf(Object.keys(known)).distinct().toArray();
  for (const { status, tubs, operation } of queued) {
    if (status !== 'waiting' && status !== 'sent') continue;
    const { installId, deviceSeq } = operation;
    for (const id of tubs) {
      const ofBucket = known[id];
      if (ofBucket !== undefined) ofBucket[installId] = Math.max(ofBucket[installId] ?? 0, deviceSeq);
    }
  }
  return known;
}
