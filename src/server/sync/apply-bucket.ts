import type { OperationBody } from '#contract/operation-bodies.ts';
import { type ApplyContext, RejectedError } from './apply-context.ts';
import { moveBucket, requireBucket } from './move-bucket.ts';
import { requireOwn } from './require-own.ts';

type BodyOf<T extends OperationBody['type']> = Extract<OperationBody, { type: T }>['body'];

export function applyBatchReleased(context: ApplyContext, body: BodyOf<'batch-released'>): void {
  const { draft, seq, operation } = context;
  if (!draft.hasBatch(body.batchId)) throw new RejectedError('no-such-batch', 'There is no such batch in this shop.');
  draft.writes.releases.push({ batchId: body.batchId, light: body.release.light, releasedBy: operation.actorId });
  for (const tub of draft.tubsOfBatch(body.batchId)) draft.tubs.set(tub.id, { ...tub, released: true, changeSeq: seq });
}

export function applyIssued(context: ApplyContext, body: BodyOf<'bucket-issued'>): void {
  const bucket = requireBucket(context, body.bucketId);
  requireOwn(context, 'jobs', body.jobId);
  if (!bucket.released && body.overrideReason === null) {
    throw new RejectedError('not-released', 'This ink is not released. Name a reason to issue it.');
  }
  moveBucket(context, bucket, [], { state: 'at-press', jobId: body.jobId, locationId: null });
}

export function applyReturned(context: ApplyContext, body: BodyOf<'bucket-returned'>): void {
  requireWeighed(body);
  const bucket = requireBucket(context, body.bucketId);
  requireOwn(context, 'jobs', body.jobId);
  requireOwn(context, 'locations', body.locationId);
  const balance = bucket.balanceMg + body.deltaMg;
  moveBucket(context, bucket, [{ kind: 'used', deltaMg: body.deltaMg, jobId: body.jobId ?? bucket.jobId }], {
    tareMg: body.tareMg,
    locationId: body.locationId,
    jobId: body.jobId ?? bucket.jobId,
    grade: bucket.grade === 'untouched' ? 'returned' : bucket.grade,
    generation: bucket.generation + 1,
    state: body.condition === 'dirty' ? 'quarantine' : balance === 0 ? 'empty' : 'shelf',
  });
}

export function applyRelocated(context: ApplyContext, body: BodyOf<'bucket-relocated'>): void {
  requireOwn(context, 'locations', body.locationId);
  moveBucket(context, requireBucket(context, body.bucketId), [], { locationId: body.locationId });
}

export function applyRecounted(context: ApplyContext, body: BodyOf<'bucket-recounted'>): void {
  requireWeighed(body);
  const bucket = requireBucket(context, body.bucketId);
  const change = { tareMg: body.tareMg, needsRecount: false };
  moveBucket(context, bucket, [{ kind: 'recounted', deltaMg: body.deltaMg }], change);
}

export function applyDiscarded(context: ApplyContext, body: BodyOf<'bucket-discarded'>): void {
  const bucket = requireBucket(context, body.bucketId);
  moveBucket(context, bucket, [{ kind: 'discarded', deltaMg: -bucket.balanceMg }], {
    state: 'discarded',
    needsRecount: false,
  });
}

/** The change was fixed at the scale; it must be what was read less what was shown. */
function requireWeighed(body: { grossMg: number; tareMg: number; displayedMg: number; deltaMg: number }): void {
  const net = body.grossMg - body.tareMg;
  if (net < 0) throw new RejectedError('below-tare', 'The gross weight is below the tare.');
  if (body.deltaMg !== net - body.displayedMg) throw new RejectedError('sum', 'Gross, tare and change do not add up.');
}
