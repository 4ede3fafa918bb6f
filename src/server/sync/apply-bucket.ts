import type { OperationBody } from '#contract/operation-bodies.ts';
import { moveBucket, requireBucket } from '#server/repositories/buckets.ts';
import { requireOwn } from '#server/repositories/require-own.ts';
import { type ApplyContext, RejectedError } from './apply-context.ts';

type BodyOf<T extends OperationBody['type']> = Extract<OperationBody, { type: T }>['body'];

export async function applyBatchReleased(context: ApplyContext, body: BodyOf<'batch-released'>): Promise<void> {
  const { trx, shopId, seq, operation } = context;
  const batch = await trx
    .updateTable('batches')
    .set({ state: 'released', light: body.release.light, releasedBy: operation.actorId, changeSeq: seq })
    .where('shopId', '=', shopId)
    .where('id', '=', body.batchId)
    .returning('id')
    .executeTakeFirst();
  if (batch === undefined) throw new RejectedError('no-such-batch', 'There is no such batch in this shop.');
  await trx
    .updateTable('buckets')
    .set({ released: true, changeSeq: seq })
    .where('shopId', '=', shopId)
    .where('batchId', '=', body.batchId)
    .execute();
}

export async function applyIssued(context: ApplyContext, body: BodyOf<'bucket-issued'>): Promise<void> {
  const bucket = await requireBucket(context, body.bucketId);
  await requireOwn(context, 'jobs', body.jobId);
  if (!bucket.released && body.overrideReason === null) {
    throw new RejectedError('not-released', 'This ink is not released. Name a reason to issue it.');
  }
  await moveBucket(context, bucket, [], { state: 'at-press', jobId: body.jobId, locationId: null });
}

export async function applyReturned(context: ApplyContext, body: BodyOf<'bucket-returned'>): Promise<void> {
  requireWeighed(body);
  const bucket = await requireBucket(context, body.bucketId);
  await requireOwn(context, 'jobs', body.jobId);
  await requireOwn(context, 'locations', body.locationId);
  const balance = bucket.balanceMg + body.deltaMg;
  await moveBucket(context, bucket, [{ kind: 'used', deltaMg: body.deltaMg, jobId: body.jobId ?? bucket.jobId }], {
    tareMg: body.tareMg,
    locationId: body.locationId,
    jobId: body.jobId ?? bucket.jobId,
    grade: bucket.grade === 'untouched' ? 'returned' : bucket.grade,
    generation: bucket.generation + 1,
    state: body.condition === 'dirty' ? 'quarantine' : balance === 0 ? 'empty' : 'shelf',
  });
}

export async function applyRelocated(context: ApplyContext, body: BodyOf<'bucket-relocated'>): Promise<void> {
  await requireOwn(context, 'locations', body.locationId);
  await moveBucket(context, await requireBucket(context, body.bucketId), [], { locationId: body.locationId });
}

export async function applyRecounted(context: ApplyContext, body: BodyOf<'bucket-recounted'>): Promise<void> {
  requireWeighed(body);
  const bucket = await requireBucket(context, body.bucketId);
  const change = { tareMg: body.tareMg, needsRecount: false };
  await moveBucket(context, bucket, [{ kind: 'recounted', deltaMg: body.deltaMg }], change);
}

export async function applyDiscarded(context: ApplyContext, body: BodyOf<'bucket-discarded'>): Promise<void> {
  const bucket = await requireBucket(context, body.bucketId);
  await moveBucket(context, bucket, [{ kind: 'discarded', deltaMg: -bucket.balanceMg }], {
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
