import {
  LARGEST_PUSH_BYTES,
  LARGEST_PUSH_OPERATIONS,
  PROTOCOL,
  type PushOutcome,
  pushResponse,
} from '#contract/push.ts';
import { measureClock } from './clock.ts';
import type { Outbox, QueuedOperation } from './outbox.ts';
import type { Station } from './station.ts';
import { markTried, refusedAs } from './tray-sending.ts';
import { type SyncDeps, type SyncResult, refusalOf } from './sync-result.ts';
import { withRoom } from './with-room.ts';

/** Sends what waits, in the order of recording, until nothing waits, an exchange fails or the server settles nothing. */
export async function pushOutbox(station: Station, deps: SyncDeps): Promise<SyncResult> {
  // What the server cannot take yet waits for the next run, and holds up nothing behind it.
  const later = new Set<string>();
  for (;;) {
    const batch = await markTried(station.outbox, await nextBatch(station.outbox, later), deps.now);
    if (batch.length === 0) return later.size === 0 ? { kind: 'done' } : LATER;
    const result = await pushBatch(station, batch, deps, later);
    if (result.kind !== 'done') return result;
  }
}

const LATER: SyncResult = { kind: 'held', problem: 'The server takes these logs later.' };

/** One push settles only what the server names: a portal's page or a cut answer settles nothing. */
async function pushBatch(
  station: Station,
  batch: readonly QueuedOperation[],
  deps: SyncDeps,
  later: Set<string>,
): Promise<SyncResult> {
  const requestId = deps.randomId();
  const sentAt = deps.now();
  const response = await deps
    .fetch('/api/sync/push', {
      method: 'POST',
      headers: { 'content-type': 'application/json' },
      body: JSON.stringify({ protocol: PROTOCOL, requestId, ops: batch.map((entry) => entry.operation) }),
    })
    .catch(() => undefined);
  if (response === undefined) return { kind: 'offline' };
  const refusal = await refusalOf(response, deps.now());
  if (refusal !== null) return refusal;
  const answer = pushResponse.safeParse(await response.json().catch(() => undefined));
  if (!answer.success || answer.data.requestId !== requestId) {
    return { kind: 'failed', problem: 'The answer was not for this device. It tries again.', retryAfterMs: null };
  }
  await measureClock(station.outbox, answer.data.serverTime, sentAt, deps.now());
  const { results } = answer.data;
  const settled = await withRoom(station, deps.now(), () => settle(station.outbox, batch, results, deps.now()));
  const known = later.size;
  const sent = new Set(batch.map(({ opId }) => opId));
  for (const { opId, outcome } of answer.data.results) if (outcome === 'retry' && sent.has(opId)) later.add(opId);
  return settled > 0 || later.size > known ? { kind: 'done' } : LATER;
}

async function nextBatch(outbox: Outbox, later: ReadonlySet<string>): Promise<QueuedOperation[]> {
  const all = await outbox.ops.where('status').equals('waiting').sortBy('deviceSeq');
  const waiting = all.filter(({ opId }) => !later.has(opId));
  const batch: QueuedOperation[] = [];
  let bytes = 200;
  for (const entry of waiting.slice(0, LARGEST_PUSH_OPERATIONS)) {
    bytes += new TextEncoder().encode(JSON.stringify(entry.operation)).length + 1;
    if (bytes > LARGEST_PUSH_BYTES && batch.length > 0) break;
    batch.push(entry);
  }
  return batch;
}

/** @returns how many were settled; `retry` and operations that are not named wait on */
async function settle(
  outbox: Outbox,
  batch: readonly QueuedOperation[],
  results: readonly PushOutcome[],
  now: Date,
): Promise<number> {
  const byId = new Map(results.map((result) => [result.opId, result]));
  return outbox.transaction('rw', outbox.ops, async () => {
    let settled = 0;
    for (const { opId } of batch) {
      const result = byId.get(opId);
      if (result === undefined || result.outcome === 'retry') continue;
      settled += 1;
      await outbox.ops.update(
        opId,
        result.outcome === 'rejected'
          ? { status: refusedAs(result.problem), problem: result.problem }
          : { status: 'sent', changeSeq: result.changeSeq, sentAt: now.toISOString() },
      );
    }
    return settled;
  });
}
