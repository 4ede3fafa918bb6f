import type { OperationBody } from '#contract/operation-bodies.ts';
import { discardedTub, issuedTub, recountedTub, relocatedTub, returnedTub } from '#domain/tub-effects.ts';
import { type TubFields, withEntry } from '#domain/tub-trace.ts';
import { type ApplyContext, NotYetError, RejectedError } from './apply-context.ts';
import { type TubRow, moveBucket, requireBucket } from './move-bucket.ts';
import { releaseOf } from './refused-tubs.ts';
import { requireOwn } from './require-own.ts';

type BodyOf<T extends OperationBody['type']> = Extract<OperationBody, { type: T }>['body'];

/** A release may come before its batch, which another station still holds, unless that one was refused. */
export function applyBatchReleased(context: ApplyContext, body: BodyOf<'batch-released'>): void {
  const { draft, seq, operation } = context;
  if (draft.isRefused(body.batchId)) {
    const detail = 'The entry of this batch was not accepted. Settle that one, then send this one again.';
    throw new RejectedError('batch-refused', detail);
  }
  if (!draft.hasBatch(body.batchId)) throw new NotYetError();
  draft.writes.releases.push({ batchId: body.batchId, light: body.release.light, releasedBy: operation.actorId });
  for (const tub of draft.tubsOfBatch(body.batchId)) {
    const seen = withEntry(tub.seen as TubFields['seen'], operation);
    draft.tubs.set(tub.id, { ...tub, released: true, seen, changeSeq: seq });
  }
}

export function applyIssued(context: ApplyContext, body: BodyOf<'bucket-issued'>): void {
  const bucket = requireBucket(context, body.bucketId);
  requireOwn(context, 'jobs', body.jobId);
  if (!bucket.released && body.overrideReason === null) throw releaseToCome(context, bucket);
  moveBucket(context, bucket, issuedTub(body), []);
}

/** Without a reason a station issues only what it shows as released: that release is still to come, unless it was refused. */
function releaseToCome({ draft, operation }: ApplyContext, { id, batchId }: TubRow): Error {
  const knew = Object.keys(operation.seen[id] ?? {}).length > 0;
  if (knew && batchId !== null && !draft.isRefused(releaseOf(batchId))) return new NotYetError();
  return new RejectedError('not-released', 'This ink is not released. Name a reason to issue it.');
}

export function applyReturned(context: ApplyContext, body: BodyOf<'bucket-returned'>): void {
  requireWeighed(body);
  const bucket = requireBucket(context, body.bucketId);
  requireOwn(context, 'jobs', body.jobId);
  requireOwn(context, 'locations', body.locationId);
  const used = { kind: 'used', deltaMg: body.deltaMg, jobId: body.jobId ?? bucket.jobId } as const;
  moveBucket(context, bucket, returnedTub(body), [used]);
}

export function applyRelocated(context: ApplyContext, body: BodyOf<'bucket-relocated'>): void {
  requireOwn(context, 'locations', body.locationId);
  moveBucket(context, requireBucket(context, body.bucketId), relocatedTub(body), []);
}

export function applyRecounted(context: ApplyContext, body: BodyOf<'bucket-recounted'>): void {
  requireWeighed(body);
  const bucket = requireBucket(context, body.bucketId);
  moveBucket(context, bucket, recountedTub(body), [{ kind: 'recounted', deltaMg: body.deltaMg }]);
}

export function applyDiscarded(context: ApplyContext, body: BodyOf<'bucket-discarded'>): void {
  const effect = discardedTub(body);
  const bucket = requireBucket(context, body.bucketId);
  moveBucket(context, bucket, effect, [{ kind: 'discarded', deltaMg: effect.deltaMg }]);
}

/** The change was fixed at the scale; it must be what was read less what was shown. */
function requireWeighed(body: { grossMg: number; tareMg: number; displayedMg: number; deltaMg: number }): void {
  const net = body.grossMg - body.tareMg;
  if (net < 0) throw new RejectedError('below-tare', 'The gross weight is below the tare.');
  if (body.deltaMg !== net - body.displayedMg) throw new RejectedError('sum', 'Gross, tare and change do not add up.');
}
