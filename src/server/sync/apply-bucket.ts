import type { OperationBody } from '#contract/operation-bodies.ts';
import { covers } from '#domain/seen.ts';
import { discardedTub, issuedTub, recountedTub, relocatedTub, returnedTub } from '#domain/tub-effects.ts';
import { type TubFields, withEntry } from '#domain/tub-trace.ts';
import { type ApplyContext, NotYetError, RejectedError } from './apply-context.ts';
import { moveBucket, requireBucket } from './move-bucket.ts';
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
  if (!bucket.released && body.overrideReason === null) {
    requireNothingToCome(context, bucket);
    throw new RejectedError('not-released', 'This ink is not released. Name a reason to issue it.');
  }
  moveBucket(context, bucket, issuedTub(body), []);
}

/** What others did and this station saw may be the release. @throws NotYetError when some of it has not arrived */
function requireNothingToCome({ operation }: ApplyContext, bucket: { id: string } & Pick<TubFields, 'seen'>): void {
  const { [operation.installId]: _, ...ofOthers } = operation.seen[bucket.id] ?? {};
  if (!covers(bucket.seen, ofOthers)) throw new NotYetError();
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
